import "server-only";
import { and, asc, eq, isNotNull } from "drizzle-orm";
import { database } from "@/db/client";
import { questions } from "@/db/schema/board";
import { files, frames, stacks } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { findPersonChoices } from "@/lib/board/choice-reads";
import { sortingFacts } from "@/lib/board/sorting-facts";
import type { FileId } from "@/lib/ids";
import { stemOf } from "@/lib/intake/picture-files";
import { SOFT_LIMIT, type SortFrame, type SortInput, type SortOptions } from "@/lib/sorting/types";

/** What a sorting works on, and the state of the project that it was read at. */
export interface SortBasis {
  readonly input: SortInput;
  readonly revision: number;
  readonly contentVersion: number;
  /** The board covers this content already. */
  readonly isCovered: boolean;
  /** Only what people decided is kept. */
  readonly isAnew: boolean;
  /** Of each frame, the file whose registration image stands for it. */
  readonly fileIds: ReadonlyMap<string, FileId>;
}

/** All measured frames of a project, what is decided already, and its settings; null where the project is gone. */
export async function findSortBasis(access: ProjectAccess): Promise<SortBasis | null> {
  const { projectId } = access;
  const [[project], frameRows, stackRows, questionRows] = await database().batch([
    selectProject(projectId),
    selectFrames(projectId),
    selectStacks(projectId),
    database()
      .select({ key: questions.key })
      .from(questions)
      .where(and(eq(questions.projectId, projectId), isNotNull(questions.settledAtMs))),
  ]);
  if (!project) return null;
  const { revision, contentVersion, sortedVersion, isAnew, rows, columns, ...settings } = project;
  // Read after the rest: should somebody choose in between, the revision has moved on and the proposal is not stored.
  const choices = await findPersonChoices(projectId);
  const settledQuestionKeys = questionRows.map(({ key }) => key);
  const decided = { frames: frameRows, stacks: stackRows, grid: { rows, columns }, settledQuestionKeys, choices };
  return {
    input: {
      frames: frameRows.flatMap(toSortFrame),
      facts: sortingFacts(decided, isAnew),
      options: toOptions(settings),
    },
    revision,
    contentVersion,
    isCovered: contentVersion === sortedVersion,
    isAnew,
    fileIds: new Map(frameRows.map(({ id, fileId }) => [id, fileId])),
  };
}

type ProjectId = ProjectAccess["projectId"];
type FrameRow = Awaited<ReturnType<typeof selectFrames>>[number];

function selectProject(projectId: ProjectId) {
  return database()
    .select({
      revision: projects.revision,
      contentVersion: projects.contentVersion,
      sortedVersion: projects.sortedVersion,
      isAnew: projects.isAnewWanted,
      rows: projects.rows,
      columns: projects.columns,
      overlapWanted: projects.overlapWanted,
      framesLeast: projects.framesLeast,
      framesMost: projects.framesMost,
      longestPauseSeconds: projects.longestPauseSeconds,
      expectedRows: projects.expectedRows,
      expectedColumns: projects.expectedColumns,
    })
    .from(projects)
    .where(eq(projects.id, projectId));
}

function selectFrames(projectId: ProjectId) {
  return database()
    .select({
      id: frames.id,
      fileId: files.id,
      name: files.name,
      folder: files.folder,
      lastModifiedMs: files.lastModifiedMs,
      metadata: frames.metadata,
      measurements: frames.measurements,
      orderTaken: frames.orderTaken,
      stackId: frames.stackId,
      setAside: frames.setAside,
      placedBy: frames.placedBy,
    })
    .from(frames)
    .innerJoin(files, and(eq(files.frameId, frames.id), eq(files.isRaw, false), eq(files.state, "analysed")))
    .where(and(eq(frames.projectId, projectId), isNotNull(frames.measurements)))
    .orderBy(asc(files.folder), asc(files.name), asc(files.id));
}

function selectStacks(projectId: ProjectId) {
  return database()
    .select({
      id: stacks.id,
      row: stacks.row,
      column: stacks.column,
      take: stacks.take,
      isChosenTake: stacks.isChosenTake,
      referenceId: stacks.referenceId,
      isSettled: stacks.isSettled,
      placedBy: stacks.placedBy,
    })
    .from(stacks)
    .where(eq(stacks.projectId, projectId))
    .orderBy(asc(stacks.row), asc(stacks.column), asc(stacks.take), asc(stacks.id));
}

function toSortFrame({ id, name, folder, lastModifiedMs, metadata, measurements }: FrameRow): SortFrame[] {
  if (!metadata || !measurements) return [];
  return [{ id, name: stemOf(name), folder, lastModifiedMs, metadata, measurements }];
}

function toOptions(
  settings: Omit<SortOptions, "framesPerTile" | "softLimit"> & { framesLeast: number; framesMost: number },
): SortOptions {
  const { framesLeast, framesMost, ...options } = settings;
  return { ...options, framesPerTile: { least: framesLeast, most: framesMost }, softLimit: SOFT_LIMIT };
}
