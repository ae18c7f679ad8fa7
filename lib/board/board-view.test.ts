import { expect, test } from "vitest";
import { indexBoard, lostShare } from "@/lib/board/board-index";
import { combBars } from "@/lib/board/comb";
import {
  benchCrops,
  gridOrigin,
  layoutBoard,
  picturePart,
  spotInFrame,
  spotInView,
  tileSteps,
} from "@/lib/board/layout";
import { questionPictures } from "@/lib/board/question-pictures";
import { railRuns } from "@/lib/board/rail";
import { boardStatus, stackFacts, tileLabel } from "@/lib/board/summary";
import { askMisfits } from "@/lib/board/measured-questions";
import type { Board } from "@/lib/board/model";
import { seamMarksByRow } from "@/lib/board/seam-marks";
import { makeBoard, makeEventfulBoard } from "@/tests/support/make-board";

const all = { left: true, right: true, above: true, below: true };

test("a missing tile in mid-grid loses (1 - 2o) squared of its area", () => {
  // check-values.md E43: 1/3 gives 11.1 %, 1/4 gives 25 %, 1/2 gives nothing.
  for (const [overlap, lost] of [
    [1 / 3, 0.111],
    [0.25, 0.25],
    [0.5, 0],
    [0.7, 0],
  ] as const) {
    expect(lostShare({ across: overlap, down: overlap }, all)).toBeCloseTo(lost, 3);
  }
});

test("a missing corner tile loses what its two neighbours do not cover", () => {
  // By hand: (1 - 0.25) x (1 - 0.25).
  expect(lostShare({ across: 0.25, down: 0.25 }, { ...all, left: false, above: false })).toBeCloseTo(0.5625, 12);
});

test("the index finds tiles, holes, takes, loose frames and the frames that are asked about", () => {
  const index = indexBoard(makeEventfulBoard());
  expect(index.tiles.size).toBe(17);
  expect([...index.holes.keys()]).toEqual(["B5"]);
  expect(index.tiles.get("C6")?.takes).toHaveLength(2);
  expect(index.tileOfStack.get("stack-3-6-take-2")?.name).toBe("C6");
  expect(index.loose).toHaveLength(4);
  expect([...index.askedFrames]).toEqual(["frame-17"]);
  expect(index.tiles.get("C1")?.isFew).toBe(true);
});

test("the status line says what the board holds", () => {
  expect(boardStatus(indexBoard(makeEventfulBoard()))).toEqual([
    "17 of 18 tiles",
    "5 frames set aside",
    "4 loose frames",
    "smallest overlap 18 %",
    "fewest frames 3 (C1), wanted 4 to 8",
  ]);
});

test("settled stacks are counted, and said of their tiles", () => {
  const board = makeEventfulBoard();
  const stacks = board.stacks.map((stack) => ({ ...stack, isSettled: ["stack-1-1", "stack-3-2"].includes(stack.id) }));
  const index = indexBoard({ ...board, stacks });
  expect(boardStatus(index).slice(0, 2)).toEqual(["17 of 18 tiles", "2 settled"]);
  const tile = index.tiles.get("A1");
  expect(tile && tileLabel(tile)).toBe("Tile A1, 6 of 6 frames in use, settled");
});

test("the bench's head gives settings, brightness and the noise of the mean", () => {
  const index = indexBoard(makeEventfulBoard());
  const tile = index.tiles.get("A1");
  expect(tile && stackFacts(tile, tile.frames)).toEqual([
    "6 of 6 in use",
    "1/250 s f/8 ISO 100 105 mm",
    expect.stringMatching(/^brightness varies 0\.0\d EV$/),
    "noise 41 % of one frame's",
  ]);
});

test("the comb runs from the soft limit to the best frame", () => {
  const [template] = makeBoard({ rows: 1, columns: 1, framesPerTile: 1 }).frames;
  if (!template) throw new Error("the recipe makes one frame");
  const frames = [1, 0.9, 0.8, 0.3].map((relativeSharpness, at) => ({
    ...template,
    id: `f${at}`,
    relativeSharpness,
    setAside: at === 3 ? ("soft" as const) : null,
  }));
  const bars = combBars([...frames, { ...template, id: "f4", relativeSharpness: null }]);
  // By hand: median of those in use 0.9, limit 0.9 exp(-0.2) = 0.7369; (0.8 - 0.7369) / (1 - 0.7369) = 0.240.
  expect(bars.map((bar) => bar.height)).toEqual([1, expect.closeTo(0.62, 2), expect.closeTo(0.24, 2), 0.12, null]);
  expect(bars.map((bar) => bar.isSetAside)).toEqual([false, false, false, true, false]);
});

test("a frame that was put here waits to be measured, and is no soft one", () => {
  const [template] = makeBoard({ rows: 1, columns: 1, framesPerTile: 1 }).frames;
  if (!template) throw new Error("the recipe makes one frame");
  const known = { ...template, id: "known", relativeSharpness: 1 };
  const put = { ...template, id: "put", relativeSharpness: null, shift: null, placedBy: "person" as const };
  expect(combBars([known, put]).map(({ isMeasuring }) => isMeasuring)).toEqual([false, true]);
  // Measured, but too far off to be compared; or nobody's sharpness can be told: nothing is waited for.
  expect(combBars([known, { ...put, shift: { xPx: 9, yPx: 0 } }])[1]?.isMeasuring).toBe(false);
  expect(combBars([put, { ...put, id: "other" }])[0]?.isMeasuring).toBe(false);
});

test("a seam that an open question says does not match is marked without being asked for", () => {
  const board = makeBoard({ rows: 1, columns: 2, framesPerTile: 1 });
  const [seam] = indexBoard(board).seams;
  if (!seam) throw new Error("no seam");
  const stacks = board.stacks.map((stack) => ({ ...stack, placedBy: "person" as const }));
  const [question] = askMisfits({ stacks }, [{ ...seam, overlap: null }], []);
  if (!question) throw new Error("nothing asked");
  const marks = (questions: Board["questions"]) =>
    seamMarksByRow(indexBoard({ ...board, questions }), false).get(1) ?? [];
  expect(marks([])).toEqual([]);
  expect(marks([{ ...question, id: "misfit" }])).toMatchObject([{ names: ["A1", "A2"], isMisfit: true }]);
});

test("the rail is cut where the stack changes and draws the pause there", () => {
  const { frames } = makeBoard({ rows: 1, columns: 2, framesPerTile: 3, looseFrames: 1 });
  const runs = railRuns(frames, 4);
  expect(runs.map((run) => [run.stackId, run.frames.length])).toEqual([
    ["stack-1-1", 3],
    ["stack-1-2", 3],
    [null, 1],
  ]);
  expect(runs[0]?.pause).toBeNull();
  expect(runs[1]?.pause?.text).toMatch(/^\d+ s$/);
  expect(runs[2]?.runHeightPx).toBeGreaterThanOrEqual(24);
});

test("a crop shows the same spot of a shifted frame, and says where it cannot", () => {
  const frame = { widthPx: 1500, heightPx: 1000, shift: { xPx: 10, yPx: -20 } };
  // By hand: a frame whose corner lies 10 px right and 20 px up shows the spot 10 px further left and 20 px lower.
  expect(spotInFrame(frame, { x: 700, y: 500 })).toEqual({ centreXPx: 690, centreYPx: 520, isSameSpot: true });
  const far = spotInFrame({ ...frame, shift: { xPx: 3790, yPx: 0 } }, { x: 700, y: 500 });
  // Another part of the scene: the same place of the frame, so that the mistake is seen.
  expect(far).toEqual({ centreXPx: 700, centreYPx: 500, isSameSpot: false });
  // Of the same scene, but not in the frame.
  const outside = spotInFrame({ ...frame, shift: { xPx: 100, yPx: 0 } }, { x: 40, y: 500 });
  expect(outside).toEqual({ centreXPx: 750, centreYPx: 500, isSameSpot: false });
});

test("what is compared stays inside both frames, so that it stays the same spot", () => {
  const reference = { widthPx: 1500, heightPx: 1000, shift: null };
  const frame = { widthPx: 1500, heightPx: 1000, shift: { xPx: 40, yPx: -20 } };
  const seen = { widthPx: 600, heightPx: 400 };
  // By hand: the frame begins 40 px further right and ends 20 px higher than the reference.
  expect(spotInView({ x: 0, y: 0 }, seen, [reference, frame])).toEqual({ x: 340, y: 200 });
  expect(spotInView({ x: 1500, y: 1000 }, seen, [reference, frame])).toEqual({ x: 1200, y: 780 });
  expect(spotInView({ x: 0, y: 0 }, seen, [reference, { ...frame, shift: { xPx: 3790, yPx: 0 } }])).toEqual({
    x: 300,
    y: 200,
  });
});

test("a seam's question shows both tiles at the middle of what they share", () => {
  const index = indexBoard(makeBoard({ rows: 1, columns: 2, framesPerTile: 4 }));
  const [left, right] = ["A1", "A2"].map((name) => index.tiles.get(name)?.stack);
  if (!left?.position || !right?.position) throw new Error("the recipe places its tiles");
  const asked = { frameIds: [], stackIds: [left.id, right.id] };
  const [question] = makeEventfulBoard().questions;
  if (!question) throw new Error("the recipe has questions");
  const [first, second] = questionPictures(index, { ...question, ...asked });
  const scene = (corner: { xPx: number }, centre: { centreXPx: number } | null | undefined) =>
    corner.xPx + (centre?.centreXPx ?? NaN);
  expect(first?.centre?.isSameSpot && second?.centre?.isSameSpot).toBe(true);
  expect(scene(left.position, first?.centre)).toBeCloseTo(scene(right.position, second?.centre), 6);
});

test("the bench wraps evenly: 12 frames are two rows of 6, 7 are one", () => {
  expect(benchCrops(12, 1120).perRow).toBe(6);
  expect(benchCrops(7, 1120)).toEqual({ perRow: 7, widthPx: 149, heightPx: 99 });
  expect(benchCrops(8, 1124)).toEqual({ perRow: 8, widthPx: 130, heightPx: 87 });
  expect(benchCrops(5, 330).perRow).toBe(2);
  expect(benchCrops(3, 120).widthPx).toBe(120);
});

test("a bench that wraps leaves no strip beside its crops, whatever the width", () => {
  for (let widthPx = 620; widthPx <= 2000; widthPx += 10) {
    for (const count of [8, 12, 16, 20]) {
      const { perRow, widthPx: cropPx } = benchCrops(count, widthPx);
      if (perRow < count) expect(widthPx - perRow * cropPx - (perRow - 1) * 12).toBeLessThan(perRow);
    }
  }
});

test("tiles of few columns keep two rows in view, and are no smaller than is needed to see something", () => {
  const tile = (columns: number, heightPx: number) => layoutBoard({ columns, widthPx: 1160, heightPx, aspect: 1.5 });
  for (const columns of [1, 2, 3, 4]) {
    const { pictureHeightPx, captionHeightPx, gapPx } = tile(columns, 480);
    expect(2 * (pictureHeightPx + captionHeightPx + gapPx)).toBeLessThanOrEqual(481);
  }
  expect(tile(2, 2000).tileWidthPx).toBe(420);
  expect(tile(2, 100).tileWidthPx).toBe(240);
  expect(tile(6, 100).tileWidthPx).toBe(180);
});

test("tiles show their own part, one step wide, so that neighbours' pictures meet", () => {
  const index = indexBoard(makeBoard({ rows: 2, columns: 3, framesPerTile: 4 }));
  const steps = tileSteps(index);
  expect(steps.acrossPx).toBeCloseTo(1000, -1.3);
  const origin = gridOrigin(index, steps);
  const rightEdgeOf = (name: string) => {
    const tile = index.tiles.get(name);
    if (!tile) throw new Error(`no tile ${name}`);
    const part = picturePart(tile, steps, origin);
    return (tile.stack.position?.xPx ?? NaN) + (part.x + part.width) * 1500;
  };
  const b = index.tiles.get("A2");
  const leftEdge = b ? (b.stack.position?.xPx ?? NaN) + picturePart(b, steps, origin).x * 1500 : NaN;
  expect(rightEdgeOf("A1")).toBeCloseTo(leftEdge, 6);
});

test("tiles get smaller with more columns, never smaller than the map's least", () => {
  const sizes = [6, 12, 50, 200].map((columns) => layoutBoard({ columns, widthPx: 1160, heightPx: 480, aspect: 1.5 }));
  expect(sizes.map(({ size }) => size)).toEqual(["full", "medium", "map", "map"]);
  expect(Math.min(...sizes.map(({ tileWidthPx }) => tileWidthPx))).toBe(20);
});
