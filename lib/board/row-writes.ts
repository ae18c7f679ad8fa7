import "server-only";
import { and, eq, inArray, sql } from "drizzle-orm";
import type { Transaction } from "@/db/client";
import { questions } from "@/db/schema/board";
import { frames, stacks } from "@/db/schema/frames";
import { parts } from "@/db/statement-parts";
import { ChangeConflict } from "@/lib/board/changes";
import type { Board, BoardFrame, BoardQuestion, BoardStack } from "@/lib/board/model";
import { frameIdSchema, stackIdSchema, type ProjectId, type UserId } from "@/lib/ids";

export interface Settling {
  readonly projectId: ProjectId;
  readonly userId: UserId;
  readonly nowMs: number;
  /** Questions that go without an answer: the sorting that asked them is taken back, the next may ask again. */
  readonly withdrawn: ReadonlySet<string>;
}

/**
 * Makes the rows of a board those of the board after. What a change left alone is the same object in both boards, so
 * only what differs is written.
 * @throws ChangeConflict where a new stack's id is in use elsewhere
 */
export async function storeDifference(tx: Transaction, before: Board, after: Board, settling: Settling): Promise<void> {
  const { projectId } = settling;
  const { changed, added, gone } = differenceOf(before.stacks, after.stacks);
  await requireNewIds(tx, added);
  // Places are unique at every moment: those of all stacks that change are freed before any is taken.
  const known = [...changed, ...gone].map(({ id }) => stackIdSchema.parse(id));
  for (const ids of parts(known)) {
    await tx
      .update(stacks)
      .set({ row: null, column: null })
      .where(and(eq(stacks.projectId, projectId), inArray(stacks.id, ids)));
  }
  await storeStacks(tx, projectId, [...added, ...changed]);
  await storeFrames(tx, projectId, before.frames, after.frames);
  for (const ids of parts(gone.map(({ id }) => stackIdSchema.parse(id)))) {
    await tx.delete(stacks).where(and(eq(stacks.projectId, projectId), inArray(stacks.id, ids)));
  }
  await storeQuestions(tx, differenceOf(before.questions, after.questions), settling);
}

interface Difference<Entity> {
  readonly changed: readonly Entity[];
  readonly added: readonly Entity[];
  readonly gone: readonly Entity[];
}

function differenceOf<Entity extends { readonly id: string }>(
  before: readonly Entity[],
  after: readonly Entity[],
): Difference<Entity> {
  const was = new Map(before.map((entity) => [entity.id, entity]));
  const is = new Set(after.map(({ id }) => id));
  return {
    changed: after.filter((entity) => was.has(entity.id) && was.get(entity.id) !== entity),
    added: after.filter(({ id }) => !was.has(id)),
    gone: before.filter(({ id }) => !is.has(id)),
  };
}

/** Ids of new stacks come from the client; one that another project has must not be taken over. */
async function requireNewIds(tx: Transaction, added: readonly BoardStack[]): Promise<void> {
  for (const ids of parts(added.map(({ id }) => stackIdSchema.parse(id)))) {
    const [taken] = await tx.select({ id: stacks.id }).from(stacks).where(inArray(stacks.id, ids)).limit(1);
    if (taken) throw new ChangeConflict("The new stack needs another id.", taken.id);
  }
}

async function storeStacks(tx: Transaction, projectId: ProjectId, rows: readonly BoardStack[]): Promise<void> {
  for (const part of parts(rows.map((stack) => toStackRow(projectId, stack)))) {
    await tx
      .insert(stacks)
      .values(part)
      .onConflictDoUpdate({
        target: stacks.id,
        set: {
          row: sql`excluded."row"`,
          column: sql`excluded."column"`,
          take: sql`excluded.take`,
          isChosenTake: sql`excluded.is_chosen_take`,
          referenceId: sql`excluded.reference_id`,
          isSettled: sql`excluded.is_settled`,
          shareUserId: sql`excluded.share_user_id`,
          placedBy: sql`excluded.placed_by`,
          confidence: sql`excluded.confidence`,
          reason: sql`excluded.reason`,
        },
        setWhere: eq(stacks.projectId, projectId),
      });
  }
}

function toStackRow(projectId: ProjectId, stack: BoardStack): typeof stacks.$inferInsert {
  const { id, referenceId, shareUserId, position, spot, ...fields } = stack;
  return {
    ...fields,
    id: stackIdSchema.parse(id),
    projectId,
    referenceId: referenceId === null ? null : frameIdSchema.parse(referenceId),
    shareUserId: shareUserId as UserId | null,
    positionXPx: position?.xPx ?? null,
    positionYPx: position?.yPx ?? null,
    spotX: spot.x,
    spotY: spot.y,
  };
}

/** Frames that change alike (moved to one stack, set aside for one reason) are one statement. */
async function storeFrames(
  tx: Transaction,
  projectId: ProjectId,
  before: readonly BoardFrame[],
  after: readonly BoardFrame[],
): Promise<void> {
  const was = new Map(before.map((frame) => [frame.id, frame]));
  const alike = new Map<string, { patch: FrameRowPatch; ids: string[] }>();
  for (const frame of after) {
    const old = was.get(frame.id);
    if (!old || old === frame) continue;
    const patch = toFramePatch(old, frame);
    const key = JSON.stringify(patch);
    if (key === "{}") continue;
    const group = alike.get(key) ?? { patch, ids: [] };
    group.ids.push(frame.id);
    alike.set(key, group);
  }
  for (const { patch, ids } of alike.values()) {
    for (const part of parts(ids.map((id) => frameIdSchema.parse(id)))) {
      await tx
        .update(frames)
        .set(patch)
        .where(and(eq(frames.projectId, projectId), inArray(frames.id, part)));
    }
  }
}

type FrameRowPatch = Partial<typeof frames.$inferInsert>;

/** Only what differs: what the worker measures of a frame meanwhile is not written over. */
function toFramePatch(old: BoardFrame, frame: BoardFrame): FrameRowPatch {
  const patch: FrameRowPatch = {};
  if (old.stackId !== frame.stackId) {
    patch.stackId = frame.stackId === null ? null : stackIdSchema.parse(frame.stackId);
  }
  if (old.setAside !== frame.setAside) patch.setAside = frame.setAside;
  if (old.placedBy !== frame.placedBy) patch.placedBy = frame.placedBy;
  if (old.relativeSharpness !== frame.relativeSharpness) patch.relativeSharpness = frame.relativeSharpness;
  if (old.shift !== frame.shift) {
    patch.shiftXPx = frame.shift?.xPx ?? null;
    patch.shiftYPx = frame.shift?.yPx ?? null;
  }
  if (old.confidence !== frame.confidence) patch.confidence = frame.confidence;
  if (old.reason !== frame.reason) patch.reason = frame.reason;
  return patch;
}

async function storeQuestions(
  tx: Transaction,
  { added, gone }: Difference<BoardQuestion>,
  { projectId, userId, nowMs, withdrawn }: Settling,
): Promise<void> {
  const settled = gone.filter(({ id }) => !withdrawn.has(id)).map(({ id }) => id);
  for (const ids of parts(settled)) {
    await tx
      .update(questions)
      .set({ settledAtMs: nowMs, settledBy: userId })
      .where(and(eq(questions.projectId, projectId), inArray(questions.id, ids)));
  }
  const removed = gone.filter(({ id }) => withdrawn.has(id)).map(({ id }) => id);
  for (const ids of parts(removed)) {
    await tx.delete(questions).where(and(eq(questions.projectId, projectId), inArray(questions.id, ids)));
  }
  for (const question of added) await openQuestion(tx, projectId, question);
}

/** Asked again: it is still there, answered; or a sorting has cleared it away meanwhile. */
export async function openQuestion(tx: Transaction, projectId: ProjectId, question: BoardQuestion): Promise<void> {
  // By its key: a later sorting may have asked the same under another id.
  await tx.delete(questions).where(and(eq(questions.projectId, projectId), eq(questions.key, question.key)));
  await tx.insert(questions).values({ projectId, ...question });
}
