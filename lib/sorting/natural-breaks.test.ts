import { expect, test } from "vitest";
import { naturalBreak, otsuSplit } from "./natural-breaks";

test("natural breaks of 4 5 9 10", () => {
  // check-values.md E12 (Fisher 1958, Jenks 1967).
  const found = naturalBreak(Object.freeze([9, 4, 10, 5]));
  expect(found).toMatchObject({ low: 5, high: 9, total: 26 });
  expect(found?.within).toBeCloseTo(1, 9);
  expect(found?.fit).toBeCloseTo(0.96154, 5);
});

test("pauses must be split by their logarithm: in plain seconds one lunch break is the only break", () => {
  // check-values.md E10, E11: the gaps between 0 1 2 3 / 15 16 17 18 / 31 32 34 35 / 130 131 132.
  const gaps = [1, 1, 1, 12, 1, 1, 1, 13, 1, 2, 1, 95, 1, 1];
  expect(naturalBreak(gaps)).toMatchObject({ low: 13, high: 95 });
  const logs = naturalBreak(gaps.map(Math.log));
  expect(Math.exp(logs?.low ?? 0)).toBeCloseTo(2, 9);
  expect(Math.exp(logs?.high ?? 0)).toBeCloseTo(12, 9);
  expect(logs?.fit).toBeCloseTo(0.879, 3);
  expect(Math.exp(((logs?.low ?? 0) + (logs?.high ?? 0)) / 2)).toBeCloseTo(4.9, 2);
});

test("Otsu's threshold of the textbook's histogram", () => {
  // check-values.md E13 (Otsu 1979; the textbook example, from memory).
  const found = otsuSplit([8, 7, 2, 6, 9, 4]);
  expect(found?.level).toBe(2);
  expect(found?.between).toBeCloseTo(2.6287, 4);
  expect(found?.within).toBeCloseTo(0.4909, 4);
  expect(found?.total).toBeCloseTo(3.1196, 4);
});

test("what is all alike cannot be split", () => {
  expect(naturalBreak([])).toBeNull();
  expect(naturalBreak([3, 3, 3])).toBeNull();
  expect(otsuSplit([0, 5, 0])).toBeNull();
});
