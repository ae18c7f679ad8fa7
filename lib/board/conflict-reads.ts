import "server-only";
import { and, desc, eq, gt, ne, or, sql } from "drizzle-orm";
import type { Transaction } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { changes } from "@/db/schema/board";
import type { ChangeConflict } from "@/lib/board/changes";
import type { Conflict } from "@/lib/board/command-answers";
import type { Board } from "@/lib/board/model";
import { stackName } from "@/lib/board/sentence";
import { AppError } from "@/lib/errors/app-error";
import type { ProjectId } from "@/lib/ids";

/**
 * Why a command was refused, for the person: what is there now, who made it so, and in one text both.
 * @param afterRevision - of an undo, the step it takes back: only later ones are in its way; null: any
 */
export async function explainConflict(
  tx: Transaction,
  projectId: ProjectId,
  board: Board,
  { message, subjectId }: ChangeConflict,
  afterRevision: number | null,
): Promise<AppError> {
  const present = presentOf(board, subjectId);
  const lastChange = await findLastChange(tx, projectId, {
    subjectId,
    afterRevision,
    isOfLines: subjectId === "grid" || present?.kind === "stack",
  });
  const extra = { subjectId, revision: board.revision, present, lastChange } satisfies Conflict;
  return new AppError("conflict", tell(message, nameOf(board, present), extra, afterRevision !== null), { extra });
}

function tell(message: string, name: string | null, { lastChange }: Conflict, isUndo: boolean): string {
  const what = name === null ? message : `${name}: ${message}`;
  if (!lastChange) return what;
  const did = `${lastChange.person ?? "Stackyard"} ${lastChange.sentence}`;
  return isUndo ? `${did} after this. ${what} Undo that first, or set it right by hand.` : `${what} ${did}.`;
}

function presentOf(board: Board, id: string): Conflict["present"] {
  const frame = board.frames.find((each) => each.id === id);
  if (frame) return { kind: "frame", frame: { ...frame, files: [...frame.files] } };
  const stack = board.stacks.find((each) => each.id === id);
  return stack ? { kind: "stack", stack } : null;
}

function nameOf(board: Board, present: Conflict["present"]): string | null {
  if (present?.kind === "frame") return present.frame.name;
  if (present?.kind !== "stack") return null;
  const name = stackName(board, present.stack.id);
  return `${name.charAt(0).toUpperCase()}${name.slice(1)}`;
}

/** The newest step that touched it; lines that came or went touch every stack and the grid. */
async function findLastChange(
  tx: Transaction,
  projectId: ProjectId,
  { subjectId, afterRevision, isOfLines }: { subjectId: string; afterRevision: number | null; isOfLines: boolean },
): Promise<Conflict["lastChange"]> {
  if (subjectId === "") return null;
  const named = sql`instr(${changes.steps}, ${JSON.stringify(subjectId)}) > 0`;
  const ofLines = sql`instr(${changes.steps}, '"on":"line"') > 0 or instr(${changes.steps}, '"on":"grid"') > 0`;
  const [row] = await tx
    .select({ id: changes.id, person: users.name, sentence: changes.sentence, atMs: changes.atMs })
    .from(changes)
    .leftJoin(users, eq(users.id, changes.userId))
    .where(
      and(
        eq(changes.projectId, projectId),
        // Measuring decides nothing: it is never in the way.
        ne(changes.type, "measure"),
        afterRevision === null ? undefined : gt(changes.revision, afterRevision),
        or(named, isOfLines ? ofLines : undefined, eq(changes.undoes, subjectId)),
      ),
    )
    .orderBy(desc(changes.revision))
    .limit(1);
  return row ?? null;
}
