import { describe, expect, test } from "vitest";
import { pretendShoot, toSortFrame } from "@/tests/support/accuracy/pretend-shoot";
import { findPauseLimit } from "./pause-limit";
import { pauseSeconds, stackSizesByPause } from "./pauses";
import type { SortFrame } from "./types";

const TIMES = [0, 1, 2, 3, 15, 16, 17, 18, 31, 32, 34, 35, 130, 131, 132];

describe("stacks by pauses alone", () => {
  // check-values.md E10 and E10b (constructed).
  test.each([
    [2, [4, 4, 4, 3]],
    [5, [4, 4, 4, 3]],
    [11, [4, 4, 4, 3]],
    [1, [4, 4, 2, 2, 3]],
    [12, [8, 4, 3]],
    [20, [12, 3]],
  ])("a limit of %i s", (limit, sizes) => expect(stackSizesByPause(TIMES, limit)).toEqual(sizes));
});

function frameAt(seconds: number, change: Partial<NonNullable<SortFrame["metadata"]["takenAt"]>> = {}): SortFrame {
  const [plain] = pretendShoot({
    rows: 1,
    columns: 1,
    framesPerTile: 1,
    order: { along: "rows", from: "top-left", turns: false },
  });
  if (!plain) throw new Error("a shoot of one frame has one");
  const frame = toSortFrame({ ...plain, seconds }, 0);
  const { takenAt } = frame.metadata;
  return { ...frame, metadata: { ...frame.metadata, takenAt: takenAt && { ...takenAt, ...change } } };
}

describe("pauseSeconds", () => {
  test.each([
    [5, 12.5, 7.5],
    [5, 4.5, 0.01],
    [5, 3, null],
    [5, 1805, 1800],
    [5, 1806, null],
  ])("from %f s to %f s: %s", (from, to, expected) => {
    expect(pauseSeconds(frameAt(from), frameAt(to))).toBe(expected);
  });

  test("whole seconds are never taken as less than half a second", () => {
    expect(pauseSeconds(frameAt(5, { hasFraction: false }), frameAt(5, { hasFraction: false }))).toBe(0.5);
  });

  test("two offsets from UTC are evened out", () => {
    expect(pauseSeconds(frameAt(3600, { offsetMinutes: 60 }), frameAt(3, { offsetMinutes: 0 }))).toBe(3);
  });
});

describe("findPauseLimit", () => {
  test("cuts where the pairs decided by the pictures err least", () => {
    const decided = [1, 1.5, 2, 9].map((seconds) => ({ seconds, isSame: true }));
    const others = [8, 10, 14].map((seconds) => ({ seconds, isSame: false }));
    const limit = findPauseLimit([...decided, ...others], []);
    // Between 2 and 8 one pause within a stack (9 s) is on the wrong side, elsewhere more weight is.
    expect(limit?.seconds).toBeCloseTo(4, 9);
    expect(limit?.errorShare).toBeCloseTo(1 / 7, 9);
  });

  test("falls back on the natural break of all log pauses", () => {
    const gaps = TIMES.slice(1).map((time, at) => time - (TIMES[at] ?? 0));
    expect(findPauseLimit([], gaps)?.seconds).toBeCloseTo(4.9, 2);
  });

  test("says nothing where pauses are all alike", () => expect(findPauseLimit([], [5, 5, 6, 5])).toBeNull());
});
