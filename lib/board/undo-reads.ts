import "server-only";
import { and, asc, desc, eq, gt, isNotNull, lte, ne, or, sql } from "drizzle-orm";
import type { Database, Transaction } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { changes } from "@/db/schema/board";
import type { ProjectAccess } from "@/lib/auth/gate";
import { allows } from "@/lib/auth/roles";
import { applyChanges, ChangeConflict, invertChanges, type Change } from "@/lib/board/changes";
import type { CommandOf } from "@/lib/board/command-schema";
import { sumOfChanges } from "@/lib/board/diff-boards";
import type { Board } from "@/lib/board/model";
import { describeUndo } from "@/lib/board/sentence";
import { listUnfitShares } from "@/lib/board/share-reads";
import { standingAfter, undoneSteps } from "@/lib/board/standing";
import { countOf } from "@/lib/board/words";
import { AppError } from "@/lib/errors/app-error";
import type { ProjectId } from "@/lib/ids";

/** What a command comes to before it is stored. */
export interface Plan {
  /** Of an undo, before what others did since is taken into account: `planInverted`. */
  readonly steps: readonly Change[];
  /** Its sentence in the record. */
  readonly describe: (after: Board) => string;
  /** The step that it takes back. */
  readonly undoes: string | null;
  /** Everything after this revision is what it takes back; only what came later can be in its way. */
  readonly afterRevision: number | null;
  /** Names of the tiles of the step that it undoes, as they were called then; none: those that the steps touch. */
  readonly tiles?: readonly string[];
}

/**
 * Takes back one step of the person's own, or takes back their taking it back.
 * @throws AppError not_found, forbidden; ChangeConflict where it has been taken back, or where a later step is in the way
 */
export async function planUndo(
  tx: Transaction,
  access: ProjectAccess,
  { commandId }: CommandOf<"undo">,
): Promise<Plan> {
  const [step] = await tx
    .select({
      id: changes.id,
      userId: changes.userId,
      name: users.name,
      revision: changes.revision,
      steps: changes.steps,
      sentence: changes.sentence,
      tiles: changes.tiles,
    })
    .from(changes)
    .leftJoin(users, eq(users.id, changes.userId))
    .where(and(eq(changes.projectId, access.projectId), eq(changes.id, commandId)));
  if (!step) throw new AppError("not_found", "There is no such step in this project.");
  if (step.userId !== access.userId) throw notYours(step.name);
  const undoing = await listUndoing(tx, access.projectId);
  const isUndone = undoneSteps([...undoing, { ...step, undoes: null, undoesAfter: null }]).has(step.id);
  if (isUndone || undoing.some(({ undoes }) => undoes === step.id)) {
    throw new ChangeConflict("This step has been undone already.", step.id);
  }
  requireDivisionRight(access, step.steps);
  return {
    steps: invertChanges(step.steps),
    describe: () => describeUndo(step.sentence),
    undoes: step.id,
    afterRevision: step.revision,
    tiles: step.tiles,
  };
}

/**
 * Takes back everything after a revision, whoever did it, as one step.
 * @throws AppError forbidden; ChangeConflict where there is nothing, or a step that was not recorded in full
 */
export async function planUndoBackTo(
  tx: Transaction,
  access: ProjectAccess,
  board: Board,
  { toRevision }: CommandOf<"undo-back-to">,
): Promise<Plan> {
  const rows = await tx
    .select({
      id: changes.id,
      revision: changes.revision,
      type: changes.type,
      steps: changes.steps,
      sentence: changes.sentence,
    })
    .from(changes)
    .where(and(eq(changes.projectId, access.projectId), gt(changes.revision, toRevision)))
    .orderBy(desc(changes.revision));
  // Measuring follows what people do; by itself it is nothing to take back.
  const recorded = rows.filter(({ type }) => type !== "measure");
  const undoing = await listUndoing(tx, access.projectId);
  const byId = new Map(undoing.map((step) => [step.id, step]));
  const steps = recorded.map((row) => ({ ...row, ...(byId.get(row.id) ?? { undoes: null, undoesAfter: null }) }));
  const undone = undoneSteps([...undoing, ...steps]);
  const done = standingAfter(
    toRevision,
    steps.map((step) => ({ ...step, isUndone: undone.has(step.id) })),
  );
  if (done.length === 0) throw new ChangeConflict("Nothing done since still stands.", "grid");
  if (rows.some(({ sentence }) => sentence === "")) {
    const detail = "A sorting since then was recorded without its steps, so it cannot be undone.";
    throw new ChangeConflict(`${detail} Choose a later step.`, "grid");
  }
  const last = await nameLastStep(tx, access.projectId, toRevision);
  const taken = rows.flatMap(({ steps }) => invertChanges(steps));
  requireDivisionRight(access, taken);
  const after = applyChanges(board, taken);
  const unfit = new Set((await listUnfitShares(tx, access.projectId, board, after)).map(({ id }) => id));
  const stacks = after.stacks.map((stack) => (unfit.has(stack.id) ? { ...stack, shareUserId: null } : stack));
  const given =
    unfit.size === 0 ? "" : `; ${countOf(unfit.size, "stack")} given to nobody, as who had them may not edit any more`;
  return {
    steps: sumOfChanges(board, { ...after, stacks }, taken),
    describe: () => `undid ${countOf(done.length, "step")}, back to ${last}${given}`,
    undoes: null,
    afterRevision: null,
  };
}

/** The revision that a step goes back to; null: it takes back one step, or none. */
export const undoesAfter = sql<number | null>`json_extract(${changes.payload}, '$.toRevision')`;

/** The step that stays as the last one, in its words. */
async function nameLastStep(tx: Transaction, projectId: ProjectId, toRevision: number): Promise<string> {
  const [step] = await tx
    .select({ sentence: changes.sentence })
    .from(changes)
    .where(and(eq(changes.projectId, projectId), lte(changes.revision, toRevision), ne(changes.type, "measure")))
    .orderBy(desc(changes.revision))
    .limit(1);
  return step && step.sentence !== "" ? `“${step.sentence}”` : "the beginning";
}

/** The steps of a project that take others back, oldest first. */
export async function listUndoing(db: Pick<Database, "select">, projectId: ProjectId) {
  return db
    .select({ id: changes.id, revision: changes.revision, undoes: changes.undoes, undoesAfter })
    .from(changes)
    .where(and(eq(changes.projectId, projectId), or(isNotNull(changes.undoes), eq(changes.type, "undo-back-to"))))
    .orderBy(asc(changes.revision));
}

function notYours(name: string | null): AppError {
  const whose = name === null ? "This step was not made by you." : `This step is ${name}'s, not yours.`;
  return new AppError("forbidden", `${whose} The change record can go back to before it, as a new step.`);
}

/** Who merges what is the lead's to say, also where saying it is taken back. */
function requireDivisionRight(access: ProjectAccess, steps: readonly Change[]): void {
  const dividing = steps.some((step) => step.on === "stack" && "shareUserId" in step.after);
  if (dividing && !allows(access.role, "manage")) {
    throw new AppError("forbidden", "This changes who merges what. Only a lead of the project may do this.");
  }
}
