import "server-only";
import { and, asc, eq, gte } from "drizzle-orm";
import type { Transaction } from "@/db/client";
import { changes } from "@/db/schema/board";
import { projects } from "@/db/schema/projects";
import { applyChanges, ChangeConflict } from "@/lib/board/changes";
import type { Board } from "@/lib/board/model";
import { getBoardWithin } from "@/lib/board/reads";
import { AppError } from "@/lib/errors/app-error";
import type { ProjectId } from "@/lib/ids";

/** Boards that are kept for the next command: reading 2 000 frames anew takes longer than the command itself. */
const KEPT_MOST = 8;

interface KeptBoard {
  readonly board: Board;
  /** The change that made it: a revision alone may come twice, where a transaction was rolled back. Null: revision 0. */
  readonly changeId: string | null;
}

// Next loads server modules more than once: one set of boards a process all the same. The last used is the last.
const holder: { stackyardBoards?: Map<ProjectId, KeptBoard> } = globalThis as object;

function keptBoards(): Map<ProjectId, KeptBoard> {
  return (holder.stackyardBoards ??= new Map());
}

/** Keeps the board that a command is about to leave. Safe before it is committed: see `changeId`. */
export function keepBoard(projectId: ProjectId, kept: KeptBoard): void {
  const boards = keptBoards();
  boards.delete(projectId);
  boards.set(projectId, kept);
  for (const oldest of boards.keys()) {
    if (boards.size <= KEPT_MOST) break;
    boards.delete(oldest);
  }
}

/** After a failure that nobody expected: what is kept may be wrong. */
export function forgetBoard(projectId: ProjectId): void {
  keptBoards().delete(projectId);
}

/** The newest board, as the transaction sees it: the kept one, brought up to date by the record, or read anew. */
export async function getPlanningBoard(tx: Transaction, projectId: ProjectId): Promise<Board> {
  const kept = keptBoards().get(projectId);
  const board = kept && (await bringUpToDate(tx, projectId, kept));
  return board ?? getBoardWithin(tx, projectId);
}

async function bringUpToDate(tx: Transaction, projectId: ProjectId, kept: KeptBoard): Promise<Board | null> {
  const [project] = await tx
    .select({
      revision: projects.revision,
      overlapWanted: projects.overlapWanted,
      framesLeast: projects.framesLeast,
      framesMost: projects.framesMost,
    })
    .from(projects)
    .where(eq(projects.id, projectId));
  if (!project) throw new AppError("not_found", "This project has just been deleted.");
  const rows = await tx
    .select({ id: changes.id, revision: changes.revision, type: changes.type, steps: changes.steps })
    .from(changes)
    .where(and(eq(changes.projectId, projectId), gte(changes.revision, kept.board.revision)))
    .orderBy(asc(changes.revision));
  const since = rows.filter(({ revision }) => revision > kept.board.revision);
  const madeBy = rows.find(({ revision }) => revision === kept.board.revision)?.id ?? null;
  const isGapless = kept.board.revision + since.length === project.revision;
  if (madeBy !== kept.changeId || !isGapless || since.some(({ type }) => type === "sort")) return null;
  const { revision, framesLeast, framesMost, overlapWanted } = project;
  try {
    const steps = since.flatMap((row) => row.steps);
    const board = steps.length === 0 ? kept.board : applyChanges(kept.board, steps);
    const framesPerTile = { least: framesLeast, most: framesMost };
    return { ...board, revision, grid: { ...board.grid, overlapWanted, framesPerTile } };
  } catch (error) {
    if (error instanceof ChangeConflict) return null;
    throw error;
  }
}
