import "server-only";
import { isDeepStrictEqual } from "node:util";
import { eq } from "drizzle-orm";
import { type Transaction, writeTransaction } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { changes } from "@/db/schema/board";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { allows } from "@/lib/auth/roles";
import { applyChanges, type Change, ChangeConflict } from "@/lib/board/changes";
import type { CommandAnswer } from "@/lib/board/command-answers";
import type { BoardCommand, PlannedCommand } from "@/lib/board/command-schema";
import { explainConflict } from "@/lib/board/conflict-reads";
import { unmeasuredSeams } from "@/lib/board/current-seams";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { requestMeasuring } from "@/lib/board/measure-writes";
import { planInverted } from "@/lib/board/plan-inverted";
import { forgetBoard, getPlanningBoard, keepBoard } from "@/lib/board/planning-reads";
import { storeDifference } from "@/lib/board/row-writes";
import { describeCommand } from "@/lib/board/sentence";
import { listUnfitShares } from "@/lib/board/share-reads";
import { areNeighboursOther, stacksToMeasure, touchedTiles } from "@/lib/board/touched";
import { type Plan, planUndo, planUndoBackTo } from "@/lib/board/undo-reads";
import { requireWholeBoard } from "@/lib/board/whole-board";
import { AppError } from "@/lib/errors/app-error";
import { publish } from "@/lib/events/publish";
import { type ProjectId, userIdSchema, type UserId } from "@/lib/ids";

/**
 * Carries out a person's command on the newest board: checked, stored, recorded and told of in one transaction. A
 * command that finds nothing to do is recorded all the same. The same id again answers the same and does nothing.
 * @throws AppError forbidden, not_found, invalid; conflict with what is there now (`conflictSchema`)
 */
export async function runCommand(access: ProjectAccess, command: BoardCommand, nowMs: number): Promise<CommandAnswer> {
  const { userId } = access;
  if (userId === null) throw new AppError("forbidden", "Commands are given by people.");
  if (command.type === "assign" && !allows(access.role, "manage")) {
    throw new AppError("forbidden", "Only a lead of the project may say who merges what.");
  }
  try {
    return await writeTransaction((tx) => carryOut(tx, { access, userId, command, nowMs }));
  } catch (error) {
    if (!(error instanceof AppError)) forgetBoard(access.projectId);
    throw error;
  }
}

interface Order {
  readonly access: ProjectAccess;
  readonly userId: UserId;
  readonly command: BoardCommand;
  readonly nowMs: number;
}

async function carryOut(tx: Transaction, order: Order): Promise<CommandAnswer> {
  const known = await findAnswer(tx, order);
  if (known) return known;
  const { projectId } = order.access;
  const board = await getPlanningBoard(tx, projectId);
  let afterRevision: number | null = null;
  try {
    const asked = await planOrder(tx, board, order);
    afterRevision = asked.afterRevision;
    const plan = { ...asked, steps: presentSteps(board, asked, order.access) };
    const after = { ...applyChanges(board, plan.steps), revision: board.revision + 1 };
    // Going back to before a step makes a board that was there.
    if (order.command.type !== "undo-back-to") requireWholeBoard(board, after);
    await requireShares(tx, projectId, board, after);
    await storeDifference(tx, board, after, { ...order, projectId, withdrawn: withdrawnBy(plan.steps) });
    await record(tx, order, { before: board, after, plan });
    keepBoard(projectId, { board: after, changeId: order.command.id });
    return { id: order.command.id, revision: after.revision, changes: [...plan.steps] };
  } catch (error) {
    if (error instanceof ChangeConflict) throw await explainConflict(tx, projectId, board, error, afterRevision);
    throw error;
  }
}

function presentSteps(board: Board, { steps, undoes }: Plan, access: ProjectAccess): readonly Change[] {
  return undoes === null ? steps : planInverted(board, steps, allows(access.role, "manage"));
}

function withdrawnBy(steps: readonly Change[]): Set<string> {
  const closed = steps.filter((change) => change.on === "question" && !change.isOpen);
  return new Set(closed.flatMap((change) => ("isWithdrawn" in change && change.isWithdrawn ? change.question.id : [])));
}

/** What was answered to this id before. @throws AppError invalid where somebody else, or another command, has used it */
async function findAnswer(tx: Transaction, { access, userId, command }: Order): Promise<CommandAnswer | null> {
  const [known] = await tx
    .select({
      projectId: changes.projectId,
      userId: changes.userId,
      payload: changes.payload,
      revision: changes.revision,
      steps: changes.steps,
    })
    .from(changes)
    .where(eq(changes.id, command.id));
  if (!known) return null;
  const isSame =
    known.projectId === access.projectId &&
    known.userId === userId &&
    isDeepStrictEqual(known.payload, JSON.parse(JSON.stringify({ ...command, revision: known.payload.revision })));
  if (!isSame) throw new AppError("invalid", "id: another command has this id. Send this one with a new id.");
  return { id: command.id, revision: known.revision, changes: [...known.steps] };
}

async function planOrder(tx: Transaction, board: Board, { access, command }: Order): Promise<Plan> {
  if (command.type === "undo") return planUndo(tx, access, command);
  if (command.type === "undo-back-to") return planUndoBackTo(tx, access, board, command);
  const steps = planCommand(board, command);
  const nameOf = await nameOfAssignee(tx, command);
  const describe = (after: Board) => describeCommand(command, { before: board, after, nameOf });
  return { steps, describe, undoes: null, afterRevision: null };
}

async function nameOfAssignee(tx: Transaction, command: PlannedCommand): Promise<() => string> {
  if (command.type !== "assign" || command.userId === null) return () => "somebody";
  const id = userIdSchema.parse(command.userId);
  const [user] = await tx.select({ name: users.name }).from(users).where(eq(users.id, id));
  return () => user?.name ?? "somebody";
}

/** Whoever gets stacks to merge must be in the project and may edit: also where an undo gives them back. */
async function requireShares(tx: Transaction, projectId: ProjectId, before: Board, after: Board): Promise<void> {
  const [refused] = await listUnfitShares(tx, projectId, before, after);
  if (!refused) return;
  throw new ChangeConflict("Only a lead or an editor of this project can be given stacks to merge.", refused.id);
}

async function record(
  tx: Transaction,
  { access, userId, command, nowMs }: Order,
  { before, after, plan }: { before: Board; after: Board; plan: Plan },
): Promise<void> {
  const { projectId } = access;
  const { revision, grid } = after;
  await tx.update(projects).set({ revision, rows: grid.rows, columns: grid.columns }).where(eq(projects.id, projectId));
  await tx.insert(changes).values({
    id: command.id,
    projectId,
    revision,
    userId,
    type: command.type,
    payload: command,
    steps: plan.steps,
    sentence: plan.describe(after),
    tiles: [...(plan.tiles ?? touchedTiles(before, after, plan.steps))],
    undoes: plan.undoes,
    atMs: nowMs,
  });
  const touched = stacksToMeasure(before, after);
  const isOther = touched.length > 0 || areNeighboursOther(before, after) || unmeasuredSeams(after).length > 0;
  if (isOther) await requestMeasuring(tx, projectId, touched, nowMs);
  await publish(tx, projectId, { type: "board.changed", revision }, nowMs);
}
