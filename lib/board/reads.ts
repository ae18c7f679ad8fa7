import "server-only";
import { and, asc, desc, eq, isNotNull, isNull } from "drizzle-orm";
import { database, type Database, type Transaction } from "@/db/client";
import { questions, seams } from "@/db/schema/board";
import { files, frames, stacks } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { Board, BoardFrame, DuplicateFile, FrameFile, UnreadableFile } from "@/lib/board/model";
import { AppError } from "@/lib/errors/app-error";
import { rawAloneReason } from "@/lib/frames/reads";
import { stemOf } from "@/lib/intake/picture-files";

/** The newest revision, without its board. */
export async function getRevision(access: ProjectAccess): Promise<number> {
  const [row] = await database()
    .select({ revision: projects.revision })
    .from(projects)
    .where(eq(projects.id, access.projectId));
  if (!row) throw gone();
  return row.revision;
}

/** The project's board at one revision: one batch, which is one transaction. */
export async function getBoard({ projectId }: ProjectAccess): Promise<Board> {
  const db = database();
  const [project, stackRows, frameRows, fileRows, seamRows, questionRows] = await db.batch([
    selectProject(db, projectId),
    selectStacks(db, projectId),
    selectFrames(db, projectId),
    selectFiles(db, projectId),
    selectSeams(db, projectId),
    selectQuestions(db, projectId),
  ]);
  return toBoard(projectId, { project, stackRows, frameRows, fileRows, seamRows, questionRows });
}

/** The board as a transaction sees it that is going to change it. */
export async function getBoardWithin(tx: Transaction, projectId: ProjectId): Promise<Board> {
  return toBoard(projectId, {
    project: await selectProject(tx, projectId),
    stackRows: await selectStacks(tx, projectId),
    frameRows: await selectFrames(tx, projectId),
    fileRows: await selectFiles(tx, projectId),
    seamRows: await selectSeams(tx, projectId),
    questionRows: await selectQuestions(tx, projectId),
  });
}

interface BoardRows {
  readonly project: Awaited<ReturnType<typeof selectProject>>;
  readonly stackRows: Awaited<ReturnType<typeof selectStacks>>;
  readonly frameRows: readonly FrameRow[];
  readonly fileRows: readonly FileRow[];
  readonly seamRows: Awaited<ReturnType<typeof selectSeams>>;
  readonly questionRows: Awaited<ReturnType<typeof selectQuestions>>;
}

function toBoard(projectId: ProjectId, rows: BoardRows): Board {
  const [project] = rows.project;
  if (!project) throw gone();
  const { framesLeast, framesMost, name, revision, ...grid } = project;
  return {
    projectId,
    projectName: name,
    revision,
    grid: { ...grid, framesPerTile: { least: framesLeast, most: framesMost } },
    stacks: rows.stackRows.map(({ positionXPx, positionYPx, spotX, spotY, ...stack }) => ({
      ...stack,
      position: point(positionXPx, positionYPx),
      spot: { x: spotX, y: spotY },
    })),
    frames: toFrames(rows.frameRows, rows.fileRows),
    seams: rows.seamRows,
    questions: rows.questionRows,
    unreadable: toUnreadable(rows.fileRows),
    duplicates: toDuplicates(rows.fileRows),
  };
}

/** The database itself, or a transaction of it. */
type Source = Pick<Database, "select">;
type ProjectId = ProjectAccess["projectId"];

function selectProject(db: Source, projectId: ProjectId) {
  return db
    .select({
      name: projects.name,
      revision: projects.revision,
      rows: projects.rows,
      columns: projects.columns,
      shotOrder: projects.shotOrder,
      overlapWanted: projects.overlapWanted,
      framesLeast: projects.framesLeast,
      framesMost: projects.framesMost,
      longestPauseSeconds: projects.usedPauseSeconds,
    })
    .from(projects)
    .where(eq(projects.id, projectId));
}

function selectStacks(db: Source, projectId: ProjectId) {
  return db
    .select({
      id: stacks.id,
      row: stacks.row,
      column: stacks.column,
      take: stacks.take,
      isChosenTake: stacks.isChosenTake,
      referenceId: stacks.referenceId,
      isSettled: stacks.isSettled,
      shareUserId: stacks.shareUserId,
      confidence: stacks.confidence,
      reason: stacks.reason,
      positionXPx: stacks.positionXPx,
      positionYPx: stacks.positionYPx,
      spotX: stacks.spotX,
      spotY: stacks.spotY,
      placedBy: stacks.placedBy,
    })
    .from(stacks)
    .where(eq(stacks.projectId, projectId))
    .orderBy(asc(stacks.row), asc(stacks.column), asc(stacks.take), asc(stacks.id));
}

/** Frames that a sorting has seen; what came in since waits for the next one. */
function selectFrames(db: Source, projectId: ProjectId) {
  return db
    .select({
      id: frames.id,
      metadata: frames.metadata,
      measurements: frames.measurements,
      orderTaken: frames.orderTaken,
      stackId: frames.stackId,
      setAside: frames.setAside,
      relativeSharpness: frames.relativeSharpness,
      shiftXPx: frames.shiftXPx,
      shiftYPx: frames.shiftYPx,
      pauseBeforeSeconds: frames.pauseBeforeSeconds,
      confidence: frames.confidence,
      reason: frames.reason,
      placedBy: frames.placedBy,
    })
    .from(frames)
    .where(and(eq(frames.projectId, projectId), isNotNull(frames.orderTaken), isNotNull(frames.measurements)))
    .orderBy(asc(frames.orderTaken), asc(frames.id));
}

/** The measured file of a frame before its raw file. */
function selectFiles(db: Source, projectId: ProjectId) {
  return db
    .select({
      id: files.id,
      frameId: files.frameId,
      name: files.name,
      folder: files.folder,
      bytes: files.bytes,
      sha256: files.sha256,
      mediaType: files.mediaType,
      state: files.state,
      isRaw: files.isRaw,
      reason: files.reason,
      duplicateOf: files.duplicateOf,
    })
    .from(files)
    .where(eq(files.projectId, projectId))
    .orderBy(asc(files.isRaw), asc(files.folder), asc(files.name), asc(files.id));
}

function selectSeams(db: Source, projectId: ProjectId) {
  return db
    .select({ stackId: seams.stackId, neighbourId: seams.neighbourId, side: seams.side, overlap: seams.overlap })
    .from(seams)
    .where(eq(seams.projectId, projectId))
    .orderBy(asc(seams.stackId), asc(seams.neighbourId));
}

function selectQuestions(db: Source, projectId: ProjectId) {
  return db
    .select({
      id: questions.id,
      key: questions.key,
      kind: questions.kind,
      message: questions.message,
      evidence: questions.evidence,
      frameIds: questions.frameIds,
      stackIds: questions.stackIds,
      tile: questions.tile,
      answers: questions.answers,
      severity: questions.severity,
    })
    .from(questions)
    .where(and(eq(questions.projectId, projectId), isNull(questions.settledAtMs)))
    .orderBy(desc(questions.severity), asc(questions.key));
}

type FrameRow = Awaited<ReturnType<typeof selectFrames>>[number];
type FileRow = Awaited<ReturnType<typeof selectFiles>>[number];

function toFrames(rows: readonly FrameRow[], fileRows: readonly FileRow[]): BoardFrame[] {
  const filesOf = new Map<string, FileRow[]>();
  for (const file of fileRows) {
    if (file.frameId) filesOf.set(file.frameId, [...(filesOf.get(file.frameId) ?? []), file]);
  }
  return rows.flatMap((row) => {
    const { shiftXPx, shiftYPx, metadata, measurements, orderTaken, ...frame } = row;
    const own = (filesOf.get(row.id) ?? []).flatMap(toFrameFile);
    const [measured] = own;
    if (!measured || !metadata || !measurements || orderTaken === null) return [];
    const { widthPx, heightPx, laplacianVariance, meanBrightness } = measurements;
    return {
      ...frame,
      name: stemOf(measured.name),
      files: own,
      metadata,
      widthPx,
      heightPx,
      orderTaken,
      laplacianVariance,
      meanBrightness,
      shift: point(shiftXPx, shiftYPx),
    };
  });
}

function toFrameFile({ id, name, folder, bytes, sha256, mediaType, state }: FileRow): FrameFile[] {
  // A raw file that is not hashed yet belongs to the frame, but there is nothing to vouch for it with.
  if (state !== "analysed" || sha256 === null || mediaType === null) return [];
  return [{ id, name, folder, bytes, sha256, mediaType }];
}

function toUnreadable(rows: readonly FileRow[]): UnreadableFile[] {
  return rows.flatMap((row) => {
    const reason = row.state === "failed" ? row.reason : rawAloneReason(row);
    const { name, folder, bytes, sha256 } = row;
    return reason === null ? [] : [{ name, folder, bytes, sha256, reason }];
  });
}

/** A duplicate of a raw file that waits alone is not listed: there is no frame to name. */
function toDuplicates(rows: readonly FileRow[]): DuplicateFile[] {
  const frameOf = new Map(rows.map(({ id, frameId }) => [id, frameId]));
  return rows.flatMap(({ name, folder, duplicateOf }) => {
    const of = duplicateOf ? frameOf.get(duplicateOf) : null;
    return of ? [{ name, folder, of }] : [];
  });
}

function point(xPx: number | null, yPx: number | null) {
  return xPx === null || yPx === null ? null : { xPx, yPx };
}

function gone(): AppError {
  return new AppError("not_found", "This project has just been deleted.");
}
