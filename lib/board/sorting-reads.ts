import "server-only";
import { and, asc, eq, isNotNull } from "drizzle-orm";
import { database } from "@/db/client";
import { questions } from "@/db/schema/board";
import { files, frames, stacks } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { FileId } from "@/lib/ids";
import { stemOf } from "@/lib/intake/picture-files";
import {
  type FixedStack,
  SOFT_LIMIT,
  type SortFacts,
  type SortFrame,
  type SortInput,
  type SortOptions,
} from "@/lib/sorting/types";

/** What a sorting works on, and the state of the project that it was read at. */
export interface SortBasis {
  readonly input: SortInput;
  readonly revision: number;
  readonly contentVersion: number;
  /** The board covers this content already. */
  readonly isCovered: boolean;
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
  const { revision, contentVersion, sortedVersion, ...settings } = project;
  return {
    input: {
      frames: frameRows.flatMap(toSortFrame),
      facts: toFacts(frameRows, stackRows, questionRows),
      options: toOptions(settings),
    },
    revision,
    contentVersion,
    isCovered: contentVersion === sortedVersion,
    fileIds: new Map(frameRows.map(({ id, fileId }) => [id, fileId])),
  };
}

type ProjectId = ProjectAccess["projectId"];
type FrameRow = Awaited<ReturnType<typeof selectFrames>>[number];
type StackRow = Awaited<ReturnType<typeof selectStacks>>[number];

function selectProject(projectId: ProjectId) {
  return database()
    .select({
      revision: projects.revision,
      contentVersion: projects.contentVersion,
      sortedVersion: projects.sortedVersion,
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

function toFacts(
  frameRows: readonly FrameRow[],
  stackRows: readonly StackRow[],
  questionRows: readonly { readonly key: string }[],
): SortFacts {
  const byPerson = frameRows.filter(({ placedBy }) => placedBy === "person");
  return {
    stacks: stackRows.map((stack) => toFixedStack(stack, frameRows)).filter(({ frameIds }) => frameIds.length > 0),
    looseFrameIds: byPerson.filter(({ stackId }) => stackId === null).map(({ id }) => id),
    setAside: Object.fromEntries(byPerson.map(({ id, setAside }) => [id, setAside])),
    settledQuestionKeys: questionRows.map(({ key }) => key),
  };
}

function toFixedStack({ isSettled, placedBy, ...stack }: StackRow, frameRows: readonly FrameRow[]): FixedStack {
  const own = frameRows.filter(({ stackId }) => stackId === stack.id);
  own.sort((a, b) => (a.orderTaken ?? 0) - (b.orderTaken ?? 0));
  return { ...stack, frameIds: own.map(({ id }) => id), byPerson: isSettled || placedBy === "person" };
}

function toOptions(
  settings: Omit<SortOptions, "framesPerTile" | "softLimit"> & { framesLeast: number; framesMost: number },
): SortOptions {
  const { framesLeast, framesMost, ...options } = settings;
  return { ...options, framesPerTile: { least: framesLeast, most: framesMost }, softLimit: SOFT_LIMIT };
}
