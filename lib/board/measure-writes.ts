import "server-only";
import { and, eq, isNotNull } from "drizzle-orm";
import { type Transaction, writeTransaction } from "@/db/client";
import { changes as changeRows, questions, seams } from "@/db/schema/board";
import { frames, stacks } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { applyChanges, type Change } from "@/lib/board/changes";
import { type Measured, measuredChanges } from "@/lib/board/measured";
import { getBoardWithin } from "@/lib/board/reads";
import { openQuestion } from "@/lib/board/row-writes";
import { touchedTiles } from "@/lib/board/touched";
import { countOf } from "@/lib/board/words";
import { publish } from "@/lib/events/publish";
import { frameIdSchema, newId, type ProjectId, stackIdSchema } from "@/lib/ids";
import { findRequested, requestJob } from "@/lib/jobs/queue";
import { MEASURE_DELAY_MS, measureJobKey, measureJobRequest, measurePayloadSchema } from "@/lib/jobs/requests";

/**
 * Asks for measuring anew, in the transaction of a command: the stacks that it changed, and whatever neighbours it made.
 * What is asked for within a second is measured together; one that waits is not put off, however busy people are.
 */
export async function requestMeasuring(
  tx: Transaction,
  projectId: ProjectId,
  stackIds: readonly string[],
  atMs: number,
): Promise<void> {
  const requested = await findRequested(tx, measureJobKey(projectId));
  const before = requested ? measurePayloadSchema.parse(requested.payload).stackIds : [];
  const delayMs = requested && !requested.isRunning ? requested.runAfterMs - atMs : MEASURE_DELAY_MS;
  await requestJob(tx, measureJobRequest(projectId, [...new Set([...before, ...stackIds])], delayMs), atMs);
}

/**
 * Stores what was measured, as one change by the computation: only what is still true of the newest board, and nothing
 * that people decide; what it asks included. Where nothing is new nothing is recorded, so it may be repeated.
 */
export async function storeMeasured({ projectId }: ProjectAccess, measured: Measured, atMs: number): Promise<void> {
  await writeTransaction(async (tx) => {
    // A project that was put in the archive meanwhile stays as it is.
    const [project] = await tx.select({ at: projects.archivedAtMs }).from(projects).where(eq(projects.id, projectId));
    if (!project || project.at !== null) return;
    const before = await getBoardWithin(tx, projectId);
    const steps = measuredChanges(before, measured, await findSettledKeys(tx, projectId));
    if (steps.length === 0) return;
    const after = applyChanges(before, steps);
    const revision = before.revision + 1;
    for (const step of steps) await storeStep(tx, projectId, step);
    await tx.update(projects).set({ revision }).where(eq(projects.id, projectId));
    const tiles = touchedTiles(before, after, steps);
    await tx.insert(changeRows).values({
      id: newId(),
      projectId,
      revision,
      userId: null,
      type: "measure",
      payload: {},
      steps,
      sentence: sentenceOf(steps, tiles),
      tiles,
      atMs,
    });
    await publish(tx, projectId, { type: "board.changed", revision }, atMs);
  });
}

async function findSettledKeys(tx: Transaction, projectId: ProjectId): Promise<string[]> {
  const rows = await tx
    .select({ key: questions.key })
    .from(questions)
    .where(and(eq(questions.projectId, projectId), isNotNull(questions.settledAtMs)));
  return rows.map(({ key }) => key);
}

function sentenceOf(steps: readonly Change[], tiles: readonly string[]): string {
  const asked = steps.filter((step) => step.on === "question" && step.isOpen).length;
  const measured = `measured ${tiles.length > 0 ? countOf(tiles.length, "tile") : "seams"} again after changes`;
  return asked === 0 ? measured : `${measured} and asked ${countOf(asked, "question")}`;
}

async function storeStep(tx: Transaction, projectId: ProjectId, step: Change): Promise<void> {
  if (step.on === "frame") {
    const { relativeSharpness, shift } = step.after;
    await tx
      .update(frames)
      .set({
        ...(relativeSharpness !== undefined && { relativeSharpness }),
        ...(shift !== undefined && { shiftXPx: shift?.xPx ?? null, shiftYPx: shift?.yPx ?? null }),
      })
      .where(and(eq(frames.id, frameIdSchema.parse(step.id)), eq(frames.projectId, projectId)));
  }
  if (step.on === "stack") {
    const { spot, position } = step.after;
    await tx
      .update(stacks)
      .set({
        ...(spot && { spotX: spot.x, spotY: spot.y }),
        ...(position && { positionXPx: position.xPx, positionYPx: position.yPx }),
      })
      .where(and(eq(stacks.id, stackIdSchema.parse(step.id)), eq(stacks.projectId, projectId)));
  }
  if (step.on === "question") {
    const { question, isOpen } = step;
    if (isOpen) await openQuestion(tx, projectId, question);
    else await tx.delete(questions).where(and(eq(questions.projectId, projectId), eq(questions.id, question.id)));
  }
  if (step.on !== "seams") return;
  for (const { stackId, neighbourId, side, overlap } of step.after) {
    const pair = { stackId: stackIdSchema.parse(stackId), neighbourId: stackIdSchema.parse(neighbourId) };
    await tx
      .insert(seams)
      .values({ projectId, ...pair, side, overlap })
      .onConflictDoUpdate({ target: [seams.stackId, seams.neighbourId], set: { side, overlap } });
  }
}
