import "server-only";
import { and, eq, inArray, isNotNull, isNull, notInArray, sql } from "drizzle-orm";
import { type Transaction, writeTransaction } from "@/db/client";
import { changes, questions, seams } from "@/db/schema/board";
import { frames, stacks } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import { parts } from "@/db/statement-parts";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { Change } from "@/lib/board/changes";
import { stepsOfSorting } from "@/lib/board/diff-boards";
import { causeStands, isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { Board } from "@/lib/board/model";
import { getBoardWithin } from "@/lib/board/reads";
import { inheritedShares } from "@/lib/board/sorting-facts";
import type { SortBasis } from "@/lib/board/sorting-reads";
import { touchedTiles } from "@/lib/board/touched";
import { countOf } from "@/lib/board/words";
import { publish } from "@/lib/events/publish";
import { frameIdSchema, newId, type ProjectId, stackIdSchema, type UserId } from "@/lib/ids";
import type { Proposal, ProposedFrame, ProposedQuestion, ProposedStack } from "@/lib/sorting/types";

/**
 * Makes a proposal the project's board: one revision, one change by the computation, all or nothing.
 * @returns false where files or board have changed since `basis` was read: sort again
 */
export async function storeProposal(
  access: ProjectAccess,
  basis: SortBasis,
  proposal: Proposal,
  nowMs: number,
): Promise<boolean> {
  const { projectId } = access;
  return writeTransaction(async (tx) => {
    const revision = basis.revision + 1;
    const before = await getBoardWithin(tx, projectId);
    const [project] = await tx
      .update(projects)
      .set({
        revision,
        rows: proposal.rows,
        columns: proposal.columns,
        shotOrder: proposal.shotOrder,
        usedPauseSeconds: proposal.longestPauseSeconds,
        sortedVersion: basis.contentVersion,
        sortedAtMs: nowMs,
        sortError: null,
        ...(basis.isAnew && { isAnewWanted: false }),
      })
      .where(
        and(
          eq(projects.id, projectId),
          eq(projects.revision, basis.revision),
          eq(projects.contentVersion, basis.contentVersion),
        ),
      )
      .returning({ id: projects.id });
    if (!project) return false;
    await storeStacks(tx, projectId, proposal.stacks, await findShares(tx, projectId, proposal));
    await storeFrames(tx, projectId, proposal.frames);
    await storeSeams(tx, projectId, proposal);
    const isMeasured = before.questions.some(isMeasuredQuestion);
    const kept = isMeasured
      ? measuredToKeep(await getBoardWithin(tx, projectId), proposal.questions)
      : new Set<string>();
    await storeQuestions(tx, projectId, proposal.questions, kept);
    const after = await getBoardWithin(tx, projectId);
    const steps = stepsOfSorting(before, after);
    const tiles = touchedTiles(before, after, steps);
    await recordSorting(tx, projectId, { revision, proposal, isAnew: basis.isAnew, steps, tiles, atMs: nowMs });
    await publish(tx, projectId, { type: "board.changed", revision }, nowMs);
    return true;
  });
}

/** Says in plain words why the board could not be worked out. */
export async function recordSortFailure(access: ProjectAccess, sortError: string, nowMs: number): Promise<void> {
  await writeTransaction(async (tx) => {
    await tx.update(projects).set({ sortError }).where(eq(projects.id, access.projectId));
    await publish(tx, access.projectId, { type: "sort.failed" }, nowMs);
  });
}

/** Whoever merges most of a new stack's frames now. */
async function findShares(tx: Transaction, projectId: ProjectId, proposal: Proposal): Promise<Map<string, UserId>> {
  const rows = await tx
    .select({ frameId: frames.id, userId: stacks.shareUserId })
    .from(frames)
    .innerJoin(stacks, eq(stacks.id, frames.stackId))
    .where(and(eq(frames.projectId, projectId), isNotNull(stacks.shareUserId)));
  const shareOfFrame = new Map(rows.flatMap(({ frameId, userId }) => (userId ? [[frameId as string, userId]] : [])));
  return inheritedShares(proposal.stacks, shareOfFrame);
}

/** Keeps a known stack's mark, share and who placed it: the computation knows nothing of them. */
async function storeStacks(
  tx: Transaction,
  projectId: ProjectId,
  proposed: readonly ProposedStack[],
  shares: ReadonlyMap<string, UserId>,
): Promise<void> {
  const ids = proposed.map(({ id }) => stackIdSchema.parse(id));
  await tx.delete(stacks).where(and(eq(stacks.projectId, projectId), notInArray(stacks.id, ids)));
  // Places are unique at every moment: all are freed before the new ones are taken.
  await tx.update(stacks).set({ row: null, column: null }).where(eq(stacks.projectId, projectId));
  const rows = proposed.map((stack) => ({
    ...toStackRow(projectId, stack),
    shareUserId: shares.get(stack.id) ?? null,
  }));
  for (const part of parts(rows)) {
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
          confidence: sql`excluded.confidence`,
          reason: sql`excluded.reason`,
          positionXPx: sql`excluded.position_x_px`,
          positionYPx: sql`excluded.position_y_px`,
          spotX: sql`excluded.spot_x`,
          spotY: sql`excluded.spot_y`,
        },
        setWhere: eq(stacks.projectId, projectId),
      });
  }
}

function toStackRow(projectId: ProjectId, stack: ProposedStack): typeof stacks.$inferInsert {
  return {
    id: stackIdSchema.parse(stack.id),
    projectId,
    row: stack.row,
    column: stack.column,
    take: stack.take,
    isChosenTake: stack.isChosenTake,
    referenceId: stack.referenceId === null ? null : frameIdSchema.parse(stack.referenceId),
    placedBy: "computation",
    confidence: stack.confidence,
    reason: stack.reason,
    positionXPx: stack.position?.xPx ?? null,
    positionYPx: stack.position?.yPx ?? null,
    spotX: stack.spot.x,
    spotY: stack.spot.y,
  };
}

async function storeFrames(tx: Transaction, projectId: ProjectId, proposed: readonly ProposedFrame[]): Promise<void> {
  for (const frame of proposed) {
    await tx
      .update(frames)
      .set({
        orderTaken: frame.orderTaken,
        stackId: frame.stackId === null ? null : stackIdSchema.parse(frame.stackId),
        setAside: frame.setAside,
        relativeSharpness: frame.relativeSharpness,
        shiftXPx: frame.shift?.xPx ?? null,
        shiftYPx: frame.shift?.yPx ?? null,
        pauseBeforeSeconds: frame.pauseBeforeSeconds,
        // Of what a person did, the person's word stays.
        confidence: sql`case when ${frames.placedBy} = 'person' then ${frames.confidence} else ${frame.confidence} end`,
        reason: sql`case when ${frames.placedBy} = 'person' then ${frames.reason} else ${frame.reason} end`,
      })
      .where(and(eq(frames.id, frameIdSchema.parse(frame.id)), eq(frames.projectId, projectId)));
  }
}

async function storeSeams(tx: Transaction, projectId: ProjectId, proposal: Proposal): Promise<void> {
  await tx.delete(seams).where(eq(seams.projectId, projectId));
  const rows = proposal.seams.map(({ stackId, neighbourId, side, overlap }) => ({
    projectId,
    stackId: stackIdSchema.parse(stackId),
    neighbourId: stackIdSchema.parse(neighbourId),
    side,
    overlap,
  }));
  for (const part of parts(rows)) await tx.insert(seams).values(part);
}

/** Of what measuring asked, ids of what is still so and what the sorting does not ask about itself. */
function measuredToKeep(sorted: Board, proposed: readonly ProposedQuestion[]): ReadonlySet<string> {
  const aboutFrames = new Set(
    proposed.filter(({ frameIds }) => frameIds.length === 1).flatMap((each) => each.frameIds),
  );
  const kept = sorted.questions.filter((question) => {
    const isAsked = question.frameIds.some((id) => aboutFrames.has(id));
    return isMeasuredQuestion(question) && !isAsked && causeStands(sorted, question);
  });
  return new Set(kept.map(({ id }) => id));
}

/**
 * Open questions are those of this proposal; one asked before keeps its id, and what is settled stays settled.
 * @param keptIds - of open questions that stay although the proposal does not ask them
 */
async function storeQuestions(
  tx: Transaction,
  projectId: ProjectId,
  proposed: readonly ProposedQuestion[],
  keptIds: ReadonlySet<string>,
): Promise<void> {
  const open = and(eq(questions.projectId, projectId), isNull(questions.settledAtMs));
  const known = await tx.select({ id: questions.id, key: questions.key }).from(questions).where(open);
  const keys = new Set(proposed.map(({ key }) => key));
  const gone = known.filter(({ id, key }) => !keys.has(key) && !keptIds.has(id)).map(({ id }) => id);
  for (const part of parts(gone)) await tx.delete(questions).where(and(open, inArray(questions.id, [...part])));
  const rows = proposed.map((question) => ({ id: newId(), projectId, ...question }));
  for (const part of parts(rows)) {
    await tx
      .insert(questions)
      .values(part)
      .onConflictDoUpdate({
        target: [questions.projectId, questions.key],
        set: {
          kind: sql`excluded.kind`,
          message: sql`excluded.message`,
          evidence: sql`excluded.evidence`,
          frameIds: sql`excluded.frame_ids`,
          stackIds: sql`excluded.stack_ids`,
          tile: sql`excluded.tile`,
          answers: sql`excluded.answers`,
          severity: sql`excluded.severity`,
        },
        setWhere: isNull(questions.settledAtMs),
      });
  }
}

interface Sorting {
  readonly revision: number;
  readonly proposal: Proposal;
  readonly isAnew: boolean;
  readonly steps: readonly Change[];
  readonly tiles: readonly string[];
  readonly atMs: number;
}

async function recordSorting(tx: Transaction, projectId: ProjectId, sorting: Sorting): Promise<void> {
  const { proposal, isAnew, ...change } = sorting;
  const counts = {
    frames: proposal.frames.length,
    stacks: proposal.stacks.length,
    questions: proposal.questions.length,
  };
  const result = `${countOf(counts.frames, "frame")} into ${countOf(counts.stacks, "stack")}`;
  const sentence = isAnew
    ? `sorted again: ${movedText(sorting.steps)}; what people decided stayed`
    : `sorted ${result}`;
  const payload = { engineVersion: proposal.engineVersion, isAnew, ...counts };
  await tx.insert(changes).values({ id: newId(), projectId, userId: null, type: "sort", payload, sentence, ...change });
}

function movedText(steps: readonly Change[]): string {
  const moved = steps.filter((step) => step.on === "frame" && "stackId" in step.after).length;
  if (moved > 0) return `${countOf(moved, "frame")} moved`;
  return steps.length === 0 ? "nothing changed" : "no frame moved";
}
