import "server-only";
import { and, asc, eq, isNull, ne, sql } from "drizzle-orm";
import { type Transaction, writeTransaction } from "@/db/client";
import { files, frames } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { FrameMeasurements } from "@/lib/analysis/types";
import type { ProjectAccess } from "@/lib/auth/gate";
import { publish } from "@/lib/events/publish";
import { frameKey } from "@/lib/frames/pairing";
import {
  type FileId,
  fileIdSchema,
  type FrameId,
  frameIdSchema,
  newId,
  type ProjectId,
  type UploadId,
} from "@/lib/ids";
import { hasRawExtension } from "@/lib/intake/picture-files";
import { requestJob } from "@/lib/jobs/queue";
import { analyseJobRequest, SORT_DELAY_MS, sortJobRequest } from "@/lib/jobs/requests";
import type { CaptureMetadata } from "@/lib/metadata/types";

export interface ReceivedFile {
  readonly uploadId: UploadId;
  readonly projectId: ProjectId;
  readonly name: string;
  readonly folder: string | null;
  readonly lastModifiedMs: number | null;
  readonly bytes: number;
}

/** Records a received file, its frame and its first job, in the transaction that finishes its upload. */
export async function recordFile(tx: Transaction, received: ReceivedFile, nowMs: number): Promise<void> {
  const { projectId, name, folder } = received;
  const id = fileIdSchema.parse(newId());
  const key = frameKey({ folder, name });
  const isRaw = hasRawExtension(name);
  const frameId = isRaw ? await findFrameWithoutRaw(tx, projectId, key) : await createFrame(tx, projectId, nowMs);
  await tx
    .insert(files)
    .values({ id, ...received, pairingKey: key, isRaw, frameId, state: "received", receivedAtMs: nowMs });
  if (!isRaw) await adoptRaw(tx, projectId, key);
  await requestJob(tx, analyseJobRequest(projectId, id), nowMs);
  await publish(tx, projectId, { type: "file.received", fileId: id }, nowMs);
}

async function createFrame(tx: Transaction, projectId: ProjectId, nowMs: number): Promise<FrameId> {
  const id = frameIdSchema.parse(newId());
  await tx.insert(frames).values({ id, projectId, createdAtMs: nowMs });
  return id;
}

/** The picture of the same exposure that has no raw file yet. */
async function findFrameWithoutRaw(tx: Transaction, projectId: ProjectId, key: string): Promise<FrameId | null> {
  // Table names by hand: in a select from one table drizzle leaves them out, and inside it they would mean the other.
  const hasRaw = sql`exists (select 1 from files as other where other.frame_id = files.frame_id and other.is_raw)`;
  const [picture] = await tx
    .select({ frameId: files.frameId })
    .from(files)
    .where(
      and(
        eq(files.projectId, projectId),
        eq(files.pairingKey, key),
        eq(files.isRaw, false),
        sql`${files.frameId} is not null`,
        sql`not ${hasRaw}`,
      ),
    )
    .orderBy(asc(files.receivedAtMs), asc(files.id))
    .limit(1);
  return picture?.frameId ?? null;
}

/** Gives a raw file that waits alone to the picture of the same exposure, where there is one now. */
async function adoptRaw(tx: Transaction, projectId: ProjectId, key: string): Promise<void> {
  const [raw] = await tx
    .select({ id: files.id })
    .from(files)
    .where(
      and(
        eq(files.projectId, projectId),
        eq(files.pairingKey, key),
        eq(files.isRaw, true),
        isNull(files.frameId),
        ne(files.state, "duplicate"),
      ),
    )
    .orderBy(asc(files.receivedAtMs), asc(files.id))
    .limit(1);
  const frameId = raw ? await findFrameWithoutRaw(tx, projectId, key) : null;
  if (raw && frameId) await tx.update(files).set({ frameId }).where(eq(files.id, raw.id));
}

export type AnalysisResult =
  | {
      readonly type: "picture";
      readonly sha256: string;
      readonly mediaType: string;
      readonly metadata: CaptureMetadata;
      readonly measurements: FrameMeasurements;
    }
  | { readonly type: "raw"; readonly sha256: string; readonly mediaType: string }
  | { readonly type: "unreadable"; readonly sha256: string | null; readonly reason: string };

/** What is known of a file inside the transaction that records its analysis. */
interface FileRow {
  readonly id: FileId;
  readonly frameId: FrameId | null;
  readonly pairingKey: string;
  readonly isRaw: boolean;
  readonly receivedAtMs: number;
}

/**
 * Records what the analysis of a file found. Of files with the same bytes the one received first stays, unless the later
 * one has its place on the board already. May be repeated: a file that is no longer waiting is left as it is.
 */
export async function recordAnalysis(
  access: ProjectAccess,
  fileId: FileId,
  result: AnalysisResult,
  nowMs: number,
): Promise<void> {
  const { projectId } = access;
  await writeTransaction(async (tx) => {
    const [file] = await tx
      .select({
        id: files.id,
        frameId: files.frameId,
        pairingKey: files.pairingKey,
        isRaw: files.isRaw,
        receivedAtMs: files.receivedAtMs,
      })
      .from(files)
      .where(and(eq(files.id, fileId), eq(files.projectId, projectId), eq(files.state, "received")));
    if (!file) return;
    if (result.type === "unreadable") await refuse(tx, file, result);
    else await accept(tx, projectId, await asFound(tx, projectId, file, result.type, nowMs), result);
    await adoptRaw(tx, projectId, file.pairingKey);
    await markContentChanged(tx, projectId, nowMs);
    await publish(tx, projectId, { type: "file.analysed", fileId }, nowMs);
  });
}

async function refuse(tx: Transaction, file: FileRow, result: AnalysisResult & { type: "unreadable" }): Promise<void> {
  const { sha256, reason } = result;
  await tx.update(files).set({ state: "failed", sha256, reason, frameId: null }).where(eq(files.id, file.id));
  await dropFrame(tx, file.frameId);
}

/** The name said raw or picture when the file came in; its content has the last word. */
async function asFound(tx: Transaction, projectId: ProjectId, file: FileRow, type: "picture" | "raw", nowMs: number) {
  const isRaw = type === "raw";
  if (isRaw === file.isRaw) return file;
  const frameId = isRaw ? null : await createFrame(tx, projectId, nowMs);
  await tx.update(files).set({ isRaw, frameId }).where(eq(files.id, file.id));
  if (isRaw) await dropFrame(tx, file.frameId);
  return { ...file, isRaw, frameId };
}

async function accept(
  tx: Transaction,
  projectId: ProjectId,
  file: FileRow,
  result: Exclude<AnalysisResult, { type: "unreadable" }>,
): Promise<void> {
  const { sha256, mediaType } = result;
  const twin = await findTwin(tx, projectId, sha256);
  if (twin && !(isEarlier(file, twin) && twin.orderTaken === null)) {
    await tx.update(files).set({ sha256, mediaType }).where(eq(files.id, file.id));
    return markDuplicate(tx, file, twin.id);
  }
  await tx.update(files).set({ state: "analysed", sha256, mediaType }).where(eq(files.id, file.id));
  if (result.type === "picture" && file.frameId) {
    const { metadata, measurements } = result;
    await tx.update(frames).set({ metadata, measurements }).where(eq(frames.id, file.frameId));
  }
  if (twin) await markDuplicate(tx, twin, file.id);
}

/** The analysed file of the project with the same bytes. */
async function findTwin(tx: Transaction, projectId: ProjectId, sha256: string) {
  const [twin] = await tx
    .select({
      id: files.id,
      frameId: files.frameId,
      pairingKey: files.pairingKey,
      isRaw: files.isRaw,
      receivedAtMs: files.receivedAtMs,
      orderTaken: frames.orderTaken,
    })
    .from(files)
    .leftJoin(frames, eq(frames.id, files.frameId))
    .where(and(eq(files.projectId, projectId), eq(files.sha256, sha256), eq(files.state, "analysed")))
    .limit(1);
  return twin ?? null;
}

function isEarlier(a: FileRow, b: FileRow): boolean {
  return a.receivedAtMs === b.receivedAtMs ? a.id < b.id : a.receivedAtMs < b.receivedAtMs;
}

async function markDuplicate(tx: Transaction, file: FileRow, duplicateOf: FileId): Promise<void> {
  await tx.update(files).set({ state: "duplicate", duplicateOf, frameId: null }).where(eq(files.id, file.id));
  // Whoever was a duplicate of this one now is of the one that stays.
  await tx.update(files).set({ duplicateOf }).where(eq(files.duplicateOf, file.id));
  await dropFrame(tx, file.frameId);
}

/** Deletes a frame that has lost its picture; a raw file that it had waits alone again. */
async function dropFrame(tx: Transaction, frameId: FrameId | null): Promise<void> {
  if (!frameId) return;
  const [picture] = await tx
    .select({ id: files.id })
    .from(files)
    .where(and(eq(files.frameId, frameId), eq(files.isRaw, false)))
    .limit(1);
  if (!picture) await tx.delete(frames).where(eq(frames.id, frameId));
}

/** The board no longer covers everything: asks for a sorting. */
async function markContentChanged(tx: Transaction, projectId: ProjectId, nowMs: number): Promise<void> {
  await tx
    .update(projects)
    .set({ contentVersion: sql`${projects.contentVersion} + 1` })
    .where(eq(projects.id, projectId));
  await requestJob(tx, sortJobRequest(projectId, SORT_DELAY_MS), nowMs);
}
