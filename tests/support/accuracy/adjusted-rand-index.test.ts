import { describe, expect, test } from "vitest";
import { adjustedRandIndex, pairwiseF1 } from "./adjusted-rand-index";

const TRUTH = [..."AAAABBBBCCCC"];

describe("adjustedRandIndex", () => {
  test.each([
    // check-values.md E16 (Hubert and Arabie 1985): 3 stacks of 4.
    ["other names", "xxxxyyyyzzzz", 1],
    ["one frame moved to the next stack", "AAAABBBCCCCC", 0.7372],
    ["two stacks merged", "AAAAAAAACCCC", 0.5217],
    ["one stack split in halves", "AADDBBBBCCCC", 0.8358],
    ["all in one", "AAAAAAAAAAAA", 0],
  ])("%s", (_, found, expected) => {
    expect(adjustedRandIndex(TRUTH, [...found])).toBeCloseTo(expected, 4);
  });

  test("1 2 3 four times against A B C D three times is worse than chance", () => {
    // check-values.md E17 (statistical documentation).
    expect(adjustedRandIndex([..."123123123123"], [..."ABCDABCDABCD"])).toBeCloseTo(-0.27907, 4);
  });

  test("refuses groupings of unequal length", () => {
    expect(() => adjustedRandIndex([1], [1, 2])).toThrow(RangeError);
  });
});

test("pairwise F1 of the same grouping is 1, of two merged stacks by hand 36 of 52", () => {
  expect(pairwiseF1(TRUTH, [..."xxxxyyyyzzzz"])).toBe(1);
  // Truth joins 3 x 6 = 18 pairs, the other 28 + 6 = 34, both 18: 2 x 18 / 52.
  expect(pairwiseF1(TRUTH, [..."AAAAAAAACCCC"])).toBeCloseTo(36 / 52, 12);
});
