import { expect, test } from "vitest";
import { applyChanges, invertChanges } from "@/lib/board/changes";
import { boardCommandSchema, type PlannedCommand } from "@/lib/board/command-schema";
import { currentSeams, unmeasuredSeams } from "@/lib/board/current-seams";
import { boardFromProposal } from "@/lib/board/from-proposal";
import { measuredChanges } from "@/lib/board/measured";
import { measureStacks } from "@/lib/board/measure-stacks";
import { isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { withPresentNames } from "@/lib/board/present-names";
import { groupDigits } from "@/lib/board/words";
import { sortFrames } from "@/lib/sorting/sort-frames";
import { SOFT_LIMIT } from "@/lib/sorting/types";
import { pretendInput, pretendShoot } from "@/tests/support/accuracy/pretend-shoot";

// What is measured is checked against the plan of a pretended shoot: 3 rows of 4 tiles of 5 frames.
/** Steps of whole pixels. */
const OVERLAP = 0.375;
const ORDER = { along: "rows", from: "top-left", turns: false } as const;
const shots = pretendShoot({ rows: 3, columns: 4, framesPerTile: 5, order: ORDER, overlap: OVERLAP });
const softened = shots.map((shot, at) => (at === 7 ? { ...shot, sharpness: -0.1 } : shot));
const { input, measurePair, asked } = pretendInput(softened);
const [WIDTH_PX, HEIGHT_PX] = [3000, 2000];

const sortedBoard = () => sortedBoardOf({ input, measurePair });

async function sortedBoardOf({ input, measurePair }: Pick<ReturnType<typeof pretendInput>, "input" | "measurePair">) {
  const files = [{ id: "f", name: "a.jpg", folder: null, bytes: 1, sha256: "0", mediaType: "image/jpeg" }];
  const source = {
    projectId: "p",
    projectName: "Harbour",
    revision: 1,
    options: input.options,
    frames: input.frames.map((frame) => ({ ...frame, files })),
    unreadable: [],
    duplicates: [],
  };
  return applyChanges(boardFromProposal(source, await sortFrames(input, measurePair)), []);
}

function after(board: Board, fields: object): Board {
  const command = boardCommandSchema.parse({ id: crypto.randomUUID(), revision: 1, ...fields }) as PlannedCommand;
  return applyChanges(board, planCommand(board, command));
}

const measure = (board: Board, stackIds: readonly string[]) =>
  measureStacks({ board, frames: input.frames, stackIds, measurePair, softLimit: SOFT_LIMIT, settledQuestionKeys: [] });

const at = (board: Board, row: number, column: number) => {
  const stack = board.stacks.find((each) => each.row === row && each.column === column);
  if (!stack) throw new Error(`nothing at ${row}, ${column}`);
  return stack;
};
const framesOf = (board: Board, stackId: string) => board.frames.filter((frame) => frame.stackId === stackId);
/** Where the plan points the camera. */
const aimOf = (id: string) =>
  softened[input.frames.findIndex((frame) => frame.id === id)]?.at ?? { xPx: NaN, yPx: NaN };

test("what the sorting measured is measured the same again, so nothing changes", async () => {
  const board = await sortedBoard();
  expect(board.stacks).toHaveLength(12);
  const measured = await measure(
    board,
    board.stacks.map(({ id }) => id),
  );
  expect(measuredChanges(board, measured)).toEqual([]);
});

test("a frame that was moved and came back gets its sharpness and shift back, as the plan has them", async () => {
  const board = await sortedBoard();
  const [home, other] = [at(board, 1, 2), at(board, 3, 4)];
  const [frame] = framesOf(board, home.id).filter(({ id }) => id !== home.referenceId);
  if (!frame) throw new Error("no frame");
  const to = (stackId: string) => ({ type: "move-frames", frameIds: [frame.id], to: { kind: "stack", stackId } });
  const moved = after(board, to(other.id));
  const changes = measuredChanges(moved, await measure(moved, [home.id, other.id]));
  const there = applyChanges(moved, changes);
  const stray = there.frames.find(({ id }) => id === frame.id);
  // Three tiles further it shows nothing of that tile: no shift can be measured, and none is claimed.
  expect(stray).toMatchObject({ stackId: other.id, placedBy: "person", setAside: null, shift: null });
  expect(stray?.relativeSharpness).not.toBeNull();
  expect(applyChanges(there, invertChanges(changes))).toEqual(moved);
  const back = after(there, to(home.id));
  expect(back.frames.find(({ id }) => id === frame.id)?.shift).toBeNull();
  const mended = applyChanges(back, measuredChanges(back, await measure(back, [home.id, other.id])));
  const restored = mended.frames.find(({ id }) => id === frame.id);
  const [aim, origin] = [aimOf(frame.id), aimOf(at(mended, 1, 2).referenceId ?? "")];
  expect(restored?.shift).toEqual({ xPx: aim.xPx - origin.xPx, yPx: aim.yPx - origin.yPx });
  expect(restored?.relativeSharpness).toBeCloseTo(frame.relativeSharpness ?? NaN, 9);
});

test("a stack split off and put to another place has its new neighbours' overlaps by the plan", async () => {
  const board = await sortedBoard();
  // Out of the grid, and the next to its place: all that lay beside it has new neighbours.
  const [left, right] = [at(board, 2, 2), at(board, 2, 3)];
  const out = after(board, { type: "place-stack", stackId: left.id, place: null });
  const split = after(out, {
    type: "split-stack",
    stackId: right.id,
    atFrameId: framesOf(out, right.id)[2]?.id,
    newStackId: "new",
    place: { row: 4, column: 3 },
  });
  expect(unmeasuredSeams(split).map(({ neighbourId }) => neighbourId)).toEqual(["new"]);
  const placed = after(split, { type: "place-stack", stackId: left.id, place: { row: 2, column: 2 } });
  const changes = measuredChanges(placed, await measure(placed, [right.id, "new"]));
  const measured = applyChanges(placed, changes);
  expect(unmeasuredSeams(measured)).toEqual([]);
  // It shows row 2 and lies below row 3: the pictures do not bear that out, so no overlap is claimed.
  expect(currentSeams(measured).find(({ neighbourId }) => neighbourId === "new")?.overlap).toBeNull();
  for (const seam of currentSeams(measured).filter(({ neighbourId }) => neighbourId !== "new")) {
    expect(seam.overlap).toBeCloseTo(OVERLAP, 2);
  }
  // Where it belongs instead: as the other take, chosen.
  const take = after(measured, { type: "place-stack", stackId: "new", place: { row: 2, column: 3 }, occupied: "take" });
  const chosen = after(take, { type: "choose-take", stackId: "new" });
  const again = applyChanges(chosen, measuredChanges(chosen, await measure(chosen, ["new"])));
  const own = currentSeams(again).filter(({ stackId, neighbourId }) => stackId === "new" || neighbourId === "new");
  expect(own).toHaveLength(4);
  for (const { overlap } of own) expect(overlap).toBeCloseTo(OVERLAP, 2);
  const position = at(again, 2, 3).position;
  const fresh = again.stacks.find(({ id }) => id === "new")?.position;
  // Two steps to the right and one down from A1's, by the plan.
  const origin = aimOf(at(board, 1, 1).referenceId ?? "");
  const aim = aimOf(again.stacks.find(({ id }) => id === "new")?.referenceId ?? "");
  expect(position).not.toBeNull();
  expect(Math.abs((fresh?.xPx ?? NaN) - (aim.xPx - origin.xPx))).toBeLessThan(0.01 * WIDTH_PX);
  expect(Math.abs((fresh?.yPx ?? NaN) - (aim.yPx - origin.yPx))).toBeLessThan(0.01 * HEIGHT_PX);
});

test("what has changed since it was measured is left alone, and decisions are never touched", async () => {
  const board = await sortedBoard();
  const [home, other] = [at(board, 1, 2), at(board, 1, 3)];
  const frames = framesOf(board, home.id);
  const to = { kind: "stack", stackId: other.id };
  const moved = after(board, { type: "move-frames", frameIds: [frames[1]?.id], to });
  const measured = await measure(moved, [home.id, other.id]);
  // Meanwhile somebody moves another frame, and sets one aside in the other stack.
  const further = after(moved, { type: "move-frames", frameIds: [frames[2]?.id], to });
  expect(measuredChanges(further, measured)).toEqual([]);
  const aside = after(moved, { type: "set-aside", frameIds: [frames[1]?.id] });
  const changes = measuredChanges(aside, measured);
  const touched = changes.flatMap((change) => (change.on === "frame" ? [change.id] : []));
  expect(framesOf(aside, other.id).filter(({ id }) => touched.includes(id))).toEqual([]);
  const fields = new Set(changes.flatMap((change) => ("after" in change ? Object.keys(change.after) : [])));
  for (const decided of ["stackId", "setAside", "placedBy", "row", "column", "take", "referenceId"]) {
    expect(fields.has(decided)).toBe(false);
  }
});

test("about one pair a frame and one a seam is measured, not the whole shoot", async () => {
  const board = await sortedBoard();
  const before = asked();
  await measure(board, [at(board, 2, 2).id]);
  // 4 from frame to frame, 4 to the neighbours.
  expect(asked() - before).toBe(8);
});

/** What is asked once everything that is touched is measured. */
async function asking(board: Board, stackIds: readonly string[], settledQuestionKeys: readonly string[] = []) {
  const settings = { softLimit: SOFT_LIMIT, settledQuestionKeys };
  const measured = await measureStacks({ board, frames: input.frames, stackIds, measurePair, ...settings });
  return applyChanges(board, measuredChanges(board, measured, settledQuestionKeys));
}
const measuredOf = (board: Board) => board.questions.filter(isMeasuredQuestion);

test("a frame of another tile is asked about, sets no scale, and nothing is asked once it is back", async () => {
  const sorted = await sortedBoard();
  const [home, other] = [at(sorted, 1, 2), at(sorted, 1, 1)];
  const [, frame] = framesOf(sorted, home.id).filter(({ id }) => id !== home.referenceId);
  if (!frame) throw new Error("no frame");
  const move = (stackId: string) => ({ type: "move-frames", frameIds: [frame.id], to: { kind: "stack", stackId } });
  const board = await asking(after(sorted, move(other.id)), [home.id, other.id]);
  const [question, ...more] = measuredOf(board);
  expect(more).toEqual([]);
  expect(withPresentNames(board).questions[0]).toMatchObject({
    kind: "stray",
    message: `${frame.name} shows another part of the scene than the rest of A1`,
    frameIds: [frame.id],
    stackIds: [other.id],
    tile: "A1",
  });
  // One tile further by the plan, to the pixel.
  const aims = [aimOf(frame.id), aimOf(other.referenceId ?? ""), aimOf(home.referenceId ?? "")] as const;
  const far = Math.round(Math.hypot(aims[0].xPx - aims[1].xPx, aims[0].yPx - aims[1].yPx));
  const near = Math.round(Math.hypot(aims[0].xPx - aims[2].xPx, aims[0].yPx - aims[2].yPx));
  const evidence = `Its picture lies ${groupDigits(far)} px from the others; it matches A2, ${near} px from its reference.`;
  expect(withPresentNames(board).questions[0]?.evidence).toBe(evidence);
  expect(withPresentNames(board).questions[0]?.answers).toEqual([
    { label: "Move it to A2", action: { type: "move-frames", frameIds: [frame.id], toStackId: home.id } },
    { label: "Set it aside", action: { type: "set-aside", frameIds: [frame.id], reason: "stray" } },
    { label: "Keep it in A1", action: { type: "keep" } },
  ]);
  // What was there before is as sharp as it was.
  for (const { id, relativeSharpness } of framesOf(sorted, other.id)) {
    expect(board.frames.find((each) => each.id === id)?.relativeSharpness).toBe(relativeSharpness);
  }
  expect(measuredOf(await asking(board, [home.id, other.id]))).toEqual([question]);
  // Moved back by hand the question goes; taken back without a word, by the next measuring.
  const back = after(board, move(home.id));
  expect(measuredOf(back)).toEqual([]);
  expect(measuredOf(await asking(back, [home.id, other.id]))).toEqual([]);
  const unsaid = { ...sorted, questions: board.questions };
  expect(measuredOf(await asking(unsaid, [home.id, other.id]))).toEqual([]);
  // Kept, it is not asked again; a second one is.
  const target = { kind: "question", questionId: question?.id, answer: 2 };
  const kept = after(board, { type: "settle", target });
  expect(measuredOf(await asking(kept, [home.id, other.id], [question?.key ?? ""]))).toEqual([]);
  const [second] = framesOf(kept, home.id).filter(({ id }) => id !== home.referenceId);
  const two = after(kept, { ...move(other.id), frameIds: [second?.id] });
  const again = measuredOf(await asking(two, [home.id, other.id], [question?.key ?? ""]));
  expect(again.map(({ frameIds }) => frameIds)).toEqual([[second?.id]]);
});

test("an intruder that is sharper than the others leaves their scores alone, also as the reference", async () => {
  const sharp = softened.map((shot, index) => (index === 6 ? { ...shot, sharpness: 0.12 } : shot));
  const other = pretendInput(sharp);
  const sorted = await sortedBoard();
  const [from, to] = [at(sorted, 1, 2), at(sorted, 1, 1)];
  const intruder = other.input.frames[6]?.id ?? "";
  const moved = after(sorted, { type: "move-frames", frameIds: [intruder], to: { kind: "stack", stackId: to.id } });
  const board = after(moved, { type: "choose-reference", stackId: to.id, frameId: intruder });
  const measured = await measureStacks({
    board,
    frames: other.input.frames,
    stackIds: [from.id, to.id],
    measurePair: other.measurePair,
    softLimit: SOFT_LIMIT,
    settledQuestionKeys: [],
  });
  const done = applyChanges(board, measuredChanges(board, measured));
  for (const { id, relativeSharpness } of framesOf(sorted, to.id)) {
    expect(done.frames.find((each) => each.id === id)?.relativeSharpness).toBe(relativeSharpness);
  }
  expect(measuredOf(done).map(({ frameIds }) => frameIds)).toEqual([[intruder]]);
});

test("frames without detail are not asked about", async () => {
  const blank = pretendShoot({
    rows: 2,
    columns: 3,
    framesPerTile: 5,
    order: ORDER,
    overlap: OVERLAP,
    isBlank: (row) => row === 1,
  });
  const plain = pretendInput(blank);
  const sorted = await sortedBoardOf(plain);
  const stackOfFrame = (nth: number) => sorted.frames.find(({ name }) => name === blank[nth]?.name)?.stackId ?? "";
  const to = { kind: "stack", stackId: stackOfFrame(0) };
  const frame = plain.input.frames[6]?.id;
  const board = after(sorted, { type: "move-frames", frameIds: [frame], to });
  const settings = { softLimit: SOFT_LIMIT, settledQuestionKeys: [] };
  const stackIds = [stackOfFrame(0), stackOfFrame(7)];
  const { frames } = plain.input;
  const measured = await measureStacks({ board, frames, stackIds, measurePair: plain.measurePair, ...settings });
  expect(measured.questions).toEqual([]);
});

test("a stack put where its neighbours do not match is asked about until it goes, not once it is meant so", async () => {
  const sorted = await sortedBoard();
  const stray = at(sorted, 3, 4);
  const out = after(sorted, { type: "place-stack", stackId: at(sorted, 1, 1).id, place: null });
  const placed = after(out, { type: "place-stack", stackId: stray.id, place: { row: 1, column: 1 } });
  const board = await asking(placed, []);
  const asked = measuredOf(withPresentNames(board));
  expect(asked).toHaveLength(1);
  expect(asked[0]).toMatchObject({ kind: "thin-seam", tile: "A1", message: "A1 does not fit beside A2 and B1" });
  expect(asked[0]?.answers.map(({ label }) => label)).toEqual(["Take A1 out of the grid", "Leave it there"]);
  const [question] = measuredOf(board);
  const settle = (answer: number) => ({
    type: "settle",
    target: { kind: "question", questionId: question?.id, answer },
  });
  const taken = after(board, settle(0));
  expect(taken.stacks.find(({ id }) => id === stray.id)?.row).toBeNull();
  expect(measuredOf(await asking(taken, []))).toEqual([]);
  expect(measuredOf(await asking(after(board, settle(1)), [], [question?.key ?? ""]))).toEqual([]);
  // Taken back without a word: what is asked goes with the next measuring, which needs no stack to be named.
  expect(measuredOf(await asking({ ...sorted, questions: board.questions }, []))).toEqual([]);
});

test("a row that is pushed on is one question", async () => {
  const sorted = await sortedBoard();
  const place = { row: 2, column: 1 };
  const pushed = after(sorted, { type: "place-stack", stackId: at(sorted, 1, 4).id, place, occupied: "push" });
  const asked = measuredOf(withPresentNames(await asking(pushed, [])));
  expect(asked.map(({ message }) => message)).toEqual([expect.stringMatching(/ do not fit beside their neighbours$/)]);
});
