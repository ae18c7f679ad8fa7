import "server-only";
import { and, asc, desc, eq, isNotNull, sql } from "drizzle-orm";
import { alias } from "drizzle-orm/sqlite-core";
import { database } from "@/db/client";
import { files, frames, uploads } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { AppError } from "@/lib/errors/app-error";
import type { IntakeFile, Progress } from "@/lib/frames/schema";
import type { FileId, FrameId, UploadId } from "@/lib/ids";
import { REASONS } from "@/lib/imaging/picture-error";
import type { Orientation } from "@/lib/metadata/types";

// Table names by hand: in a select from one table drizzle leaves them out.
const filesWhere = (condition: string) =>
  sql<number>`(select count(*) from files where files.project_id = projects.id and ${sql.raw(condition)})`;
/** A raw file without its picture is in the manifest's list of what is unreadable, until the picture comes. */
const RAW_ALONE = "(files.state = 'analysed' and files.is_raw and files.frame_id is null)";

/** Counts of one moment, of `projects`: one statement, so that no file is counted on one side only. */
export const progressColumns = {
  received: filesWhere("true"),
  analysed: filesWhere(`files.state in ('analysed', 'duplicate') and not ${RAW_ALONE}`),
  failed: filesWhere(`(files.state = 'failed' or ${RAW_ALONE})`),
  total: sql<number>`(select count(*) from ${uploads} where uploads.project_id = projects.id and uploads.cancelled_at_ms is null)`,
  isCovered: sql<number>`projects.sorted_version = projects.content_version`,
};

/** What was read by `progressColumns`, as `/progress` says it. */
export function toProgress(row: Record<keyof typeof progressColumns, number>): Progress {
  const { received, analysed, failed, total, isCovered } = row;
  const isAllIn = received > 0 && analysed + failed === received;
  return { received, analysed, failed, total, sorted: isAllIn && isCovered === 1 };
}

export async function getProgress(access: ProjectAccess): Promise<Progress> {
  const [row] = await database().select(progressColumns).from(projects).where(eq(projects.id, access.projectId));
  if (!row) throw new AppError("not_found", "This project has just been deleted.");
  return toProgress(row);
}

/** Why the last sorting failed; null: it did not. */
export async function findSortError(access: ProjectAccess): Promise<string | null> {
  const [row] = await database()
    .select({ sortError: projects.sortError })
    .from(projects)
    .where(eq(projects.id, access.projectId));
  return row?.sortError ?? null;
}

/** What came in, newest first. */
export async function listIntakeFiles(access: ProjectAccess): Promise<IntakeFile[]> {
  const original = alias(files, "original");
  const rows = await database()
    .select({
      id: files.id,
      name: files.name,
      folder: files.folder,
      bytes: files.bytes,
      lastModifiedMs: files.lastModifiedMs,
      sha256: files.sha256,
      state: files.state,
      reason: files.reason,
      isRaw: files.isRaw,
      frameId: files.frameId,
      receivedAtMs: files.receivedAtMs,
      originalId: original.id,
      originalName: original.name,
      originalFolder: original.folder,
    })
    .from(files)
    .leftJoin(original, eq(original.id, files.duplicateOf))
    .where(eq(files.projectId, access.projectId))
    .orderBy(desc(files.receivedAtMs), desc(files.id));
  return rows.map(({ originalId, originalName, originalFolder, ...row }) => ({
    ...row,
    reason: row.reason ?? rawAloneReason(row),
    duplicateOf: originalId ? { id: originalId, name: originalName ?? "", folder: originalFolder } : null,
  }));
}

/** What there is to know about a raw file whose picture has not come: it is kept and hashed, but not on the board. */
export function rawAloneReason(file: { isRaw: boolean; frameId: string | null; state: string }): string | null {
  const isAlone = file.isRaw && file.frameId === null && file.state === "analysed";
  return isAlone ? REASONS.rawAlone : null;
}

/** A file that waits for its analysis. */
export interface WaitingFile {
  readonly id: FileId;
  readonly uploadId: UploadId;
  readonly name: string;
}

/** Null where it is analysed already, or gone. */
export async function findWaitingFile(access: ProjectAccess, id: FileId): Promise<WaitingFile | null> {
  const [file] = await database()
    .select({ id: files.id, uploadId: files.uploadId, name: files.name })
    .from(files)
    .where(and(eq(files.id, id), eq(files.projectId, access.projectId), eq(files.state, "received")));
  return file ?? null;
}

/** Whether a file of the project still waits for its analysis. */
export async function hasWaitingFiles(access: ProjectAccess): Promise<boolean> {
  const [file] = await database()
    .select({ id: files.id })
    .from(files)
    .where(and(eq(files.projectId, access.projectId), eq(files.state, "received")))
    .limit(1);
  return file !== undefined;
}

/** The measured file of a frame, for its pictures. */
export interface FramePicture {
  readonly fileId: FileId;
  readonly uploadId: UploadId;
  readonly sha256: string;
  readonly orientation: Orientation;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** @throws AppError not_found where the project has no such frame, or it is not analysed yet */
export async function getFramePicture(access: ProjectAccess, frameId: FrameId): Promise<FramePicture> {
  const [row] = await database()
    .select({
      fileId: files.id,
      uploadId: files.uploadId,
      sha256: files.sha256,
      metadata: frames.metadata,
      measurements: frames.measurements,
    })
    .from(frames)
    .innerJoin(files, and(eq(files.frameId, frames.id), eq(files.isRaw, false), eq(files.state, "analysed")))
    .where(and(eq(frames.id, frameId), eq(frames.projectId, access.projectId), isNotNull(frames.measurements)))
    .orderBy(asc(files.receivedAtMs))
    .limit(1);
  if (!row?.sha256 || !row.metadata || !row.measurements) {
    throw new AppError("not_found", "There is no such frame in this project, or it is not analysed yet.");
  }
  const { widthPx, heightPx } = row.measurements;
  const { fileId, uploadId, sha256, metadata } = row;
  return { fileId, uploadId, sha256, orientation: metadata.orientation, widthPx, heightPx };
}

/** A stored original, whatever became of it: unreadable ones and duplicates are kept too. */
export interface OriginalFile {
  readonly uploadId: UploadId;
  readonly name: string;
  readonly sha256: string | null;
  readonly mediaType: string | null;
}

/** @throws AppError not_found where the project has no such file */
export async function getOriginalFile(access: ProjectAccess, fileId: FileId): Promise<OriginalFile> {
  const [file] = await database()
    .select({ uploadId: files.uploadId, name: files.name, sha256: files.sha256, mediaType: files.mediaType })
    .from(files)
    .where(and(eq(files.id, fileId), eq(files.projectId, access.projectId)));
  if (!file) throw new AppError("not_found", "There is no such file in this project.");
  return file;
}
