import { beforeEach, describe, expect, test } from "vitest";
import { desc } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, type Person, signInAs } from "../support/people";
import { callsOn } from "../support/board-calls";
import { bringInShots, planShots, sortNow } from "../support/pretend-project";
import { database } from "@/db/client";
import { changes } from "@/db/schema/board";
import { accessForJob } from "@/lib/auth/gate";
import { indexBoard } from "@/lib/board/board-index";
import { applyChanges } from "@/lib/board/changes";
import { currentSeams, unmeasuredSeams } from "@/lib/board/current-seams";
import { isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { Board } from "@/lib/board/model";
import { openPoints } from "@/lib/board/readiness";
import { requestSortingAnew } from "@/lib/board/sorting-writes";
import type { ProjectId } from "@/lib/ids";
import { createMeasureStacksHandler } from "@/lib/jobs/handlers/measure-stacks";
import { claimJob, finishJob } from "@/lib/jobs/queue";

useDatabase();
let lead: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead);
  await signInAs(lead);
  await bringInShots(projectId, planShots(2, 3));
  await sortNow();
});

/** Runs the measuring that was asked for; false where none was. */
async function measureNow(whileItRuns?: () => Promise<unknown>): Promise<boolean> {
  const job = await claimJob("measure-stacks", Date.now() + 1_000);
  if (!job) return false;
  await whileItRuns?.();
  expect(await createMeasureStacksHandler().run(job, new AbortController().signal)).toEqual({ type: "done" });
  await finishJob(job, Date.now());
  return true;
}

const at = (board: Board, row: number, column: number) => {
  const stack = board.stacks.find((each) => each.row === row && each.column === column);
  if (!stack) throw new Error(`nothing at ${row}, ${column}`);
  return stack;
};
const frameIn = (board: Board, stackId: string, nth: number) => {
  const frame = board.frames.filter((each) => each.stackId === stackId)[nth];
  if (!frame) throw new Error("no frame");
  return frame;
};

test("a moved frame is measured in its new stack within a second or so, and pages hear of it as steps", async () => {
  const calls = callsOn(projectId);
  const sorted = await calls.board();
  expect(sorted.stacks).toHaveLength(6);
  expect(await measureNow()).toBe(false);
  const [from, to] = [at(sorted, 1, 1), at(sorted, 1, 2)];
  const { id } = frameIn(sorted, from.id, 3);
  await calls.done({ type: "move-frames", frameIds: [id], to: { kind: "stack", stackId: to.id } });
  const moved = await calls.board();
  expect(moved.frames.find((frame) => frame.id === id)).toMatchObject({ relativeSharpness: null, shift: null });
  expect(await measureNow()).toBe(true);
  const measured = await calls.board();
  const frame = measured.frames.find((each) => each.id === id);
  expect(frame).toMatchObject({ stackId: to.id, placedBy: "person", setAside: null });
  expect(frame?.relativeSharpness).not.toBeNull();
  // One tile to the left by the plan: 5/8 of 3000 px.
  expect(frame?.shift?.xPx).toBeGreaterThan(-1890);
  expect(frame?.shift?.xPx).toBeLessThan(-1860);
  const since = await calls.since(moved.revision);
  if (!("changes" in since)) throw new Error("not told as steps");
  const applied = applyChanges(moved, since.changes);
  expect(applied.frames).toEqual(measured.frames);
  expect(currentSeams(applied)).toEqual(currentSeams(measured));
  // What is left in A1 is as sharp as it was: nothing changes there.
  const [newest] = await database().select().from(changes).orderBy(desc(changes.revision)).limit(1);
  expect(newest).toMatchObject({ type: "measure", userId: null, revision: measured.revision, tiles: ["A2"] });
});

test("done twice nothing more is recorded; undoing a move measures again", async () => {
  const calls = callsOn(projectId);
  const sorted = await calls.board();
  const { id } = frameIn(sorted, at(sorted, 1, 1).id, 1);
  const command = await calls.done({ type: "move-frames", frameIds: [id], to: { kind: "loose" } });
  await measureNow();
  const once = await calls.board();
  // As after a worker that was killed before it could say that it was done.
  const job = { id: "x", kind: "measure-stacks", projectId, attempts: 1, leaseToken: "x", runAfterMs: 0 } as const;
  const payload = { stackIds: sorted.stacks.map((stack) => stack.id) };
  await createMeasureStacksHandler().run({ ...job, payload }, new AbortController().signal);
  expect((await calls.board()).revision).toBe(once.revision);
  await calls.done({ type: "undo", commandId: command.id });
  expect(await measureNow()).toBe(true);
  const back = await calls.board();
  expect(back.frames.map(({ shift }) => shift)).toEqual(sorted.frames.map(({ shift }) => shift));
});

test("tiles that changed places: no overlap is shown until it is measured, and none that pictures do not bear out", async () => {
  const calls = callsOn(projectId);
  const sorted = await calls.board();
  const [left, right] = [at(sorted, 1, 1), at(sorted, 1, 2)];
  const swap = { type: "place-stack", place: { row: 1, column: 2 }, occupied: "swap" } as const;
  await calls.done({ ...swap, stackId: left.id });
  const swapped = await calls.board();
  expect(unmeasuredSeams(swapped).length).toBeGreaterThan(0);
  await measureNow();
  const measured = await calls.board();
  expect(unmeasuredSeams(measured)).toEqual([]);
  const seam = currentSeams(measured).find((each) => each.stackId === right.id && each.neighbourId === left.id);
  expect(seam?.overlap).toBeNull();
  // Back again: as it was sorted, by the plan.
  await calls.done({ ...swap, stackId: right.id });
  await measureNow();
  for (const { overlap } of currentSeams(await calls.board())) expect(overlap).toBeCloseTo(0.375, 2);
});

test("what people do while it measures stands, and is measured by the next run", async () => {
  const calls = callsOn(projectId);
  const sorted = await calls.board();
  const [home, to] = [at(sorted, 2, 1), at(sorted, 2, 2)];
  const move = (nth: number, stackId: string) =>
    calls.done({ type: "move-frames", frameIds: [frameIn(sorted, home.id, nth).id], to: { kind: "stack", stackId } });
  await move(0, to.id);
  await measureNow(() => move(1, to.id));
  await measureNow();
  const board = await calls.board();
  const moved = [0, 1].map((nth) => board.frames.find(({ id }) => id === frameIn(sorted, home.id, nth).id));
  for (const frame of moved) {
    expect(frame?.stackId).toBe(to.id);
    expect(frame?.relativeSharpness).not.toBeNull();
  }
});

describe("a frame of another tile", () => {
  /** Moves A2's third frame to A1 and measures. */
  async function intrude() {
    const calls = callsOn(projectId);
    const sorted = await calls.board();
    const [a1, a2] = [at(sorted, 1, 1), at(sorted, 1, 2)];
    const frame = frameIn(sorted, a2.id, 2);
    const move = (stackId: string) =>
      calls.done({ type: "move-frames", frameIds: [frame.id], to: { kind: "stack", stackId } });
    const command = await move(a1.id);
    const before = await calls.board();
    await measureNow();
    const board = await calls.board();
    return { calls, a1, a2, frame, move, command, before, board };
  }
  const measuredOf = (board: Board) => board.questions.filter(isMeasuredQuestion);
  const settle = (board: Board, answer: number) => ({
    type: "settle" as const,
    target: { kind: "question" as const, questionId: measuredOf(board)[0]?.id ?? "none", answer },
  });

  test("is asked about, told to open pages as a step, and listed before the handing over", async () => {
    const { calls, a1, frame, before, board } = await intrude();
    expect(measuredOf(board)).toMatchObject([{ kind: "stray", frameIds: [frame.id], stackIds: [a1.id] }]);
    const since = await calls.since(before.revision);
    if (!("changes" in since)) throw new Error("not told as steps");
    expect(applyChanges(before, since.changes).questions).toEqual(board.questions);
    expect(openPoints(indexBoard(board)).map(({ kind }) => kind)).toContain("questions");
    const [newest] = await database().select().from(changes).orderBy(desc(changes.revision)).limit(1);
    expect(newest).toMatchObject({ type: "measure", sentence: expect.stringContaining("asked 1 question") as string });
  });

  test("moved back by the answer, by hand or by undo is not asked about; once more in, it is", async () => {
    const { calls, a1, a2, move, board, command } = await intrude();
    await calls.done(settle(board, 0));
    await measureNow();
    expect(measuredOf(await calls.board())).toEqual([]);
    await move(a1.id);
    await measureNow();
    expect(measuredOf(await calls.board())).toHaveLength(1);
    await move(a2.id);
    expect(measuredOf(await calls.board())).toEqual([]);
    await measureNow();
    const last = await move(a1.id);
    await measureNow();
    expect(measuredOf(await calls.board())).toHaveLength(1);
    await calls.done({ type: "undo", commandId: last.id });
    await measureNow();
    expect(measuredOf(await calls.board())).toEqual([]);
    // Everything back to before the first move, as one step, and that step back.
    await calls.done({ type: "undo-back-to", toRevision: command.revision - 1 });
    await measureNow();
    expect(measuredOf(await calls.board())).toEqual([]);
  });

  test("that is meant so is not asked about again; undone, it is", async () => {
    const { calls, a1, board } = await intrude();
    const kept = await calls.done(settle(board, 2));
    const again = () => calls.done({ type: "set-aside", frameIds: [frameIn(board, a1.id, 0).id], reason: "by hand" });
    await again();
    await measureNow();
    expect(measuredOf(await calls.board())).toEqual([]);
    await calls.done({ type: "undo", commandId: kept.id });
    await measureNow();
    expect(measuredOf(await calls.board()).map(({ key }) => key)).toEqual(measuredOf(board).map(({ key }) => key));
  });

  test("is asked about once after a sorting that leaves it there, and not at all where that takes it out of use", async () => {
    const { calls, a1, frame } = await intrude();
    await requestSortingAnew(accessForJob({ projectId }), Date.now());
    await sortNow();
    const board = await calls.board();
    const now = board.frames.find(({ id }) => id === frame.id);
    expect(now?.stackId).toBe(a1.id);
    const about = board.questions.filter(({ frameIds }) => frameIds.includes(frame.id));
    expect(about).toHaveLength(now?.setAside === null ? 1 : 0);
  });
});

test("a stack put where its neighbours do not match is asked about, and no more once it is back", async () => {
  const calls = callsOn(projectId);
  const sorted = await calls.board();
  const [a1, b3] = [at(sorted, 1, 1), at(sorted, 2, 3)];
  const place = { row: 1, column: 1 };
  const command = await calls.done({ type: "place-stack", stackId: b3.id, place, occupied: "swap" });
  await measureNow();
  const [question, ...more] = (await calls.board()).questions.filter(isMeasuredQuestion);
  expect(question).toMatchObject({ kind: "thin-seam" });
  expect([a1.id, b3.id]).toContain(question?.stackIds[0]);
  expect(more.length).toBeLessThan(2);
  await calls.done({ type: "undo", commandId: command.id });
  expect(await measureNow()).toBe(true);
  expect((await calls.board()).questions.filter(isMeasuredQuestion)).toEqual([]);
});
