import { expect, test } from "vitest";
import { MAD_TO_SIGMA, median, medianAbsoluteDeviation, mode, modifiedZ, quantile } from "./robust";

test("MAD of 1 to 9 is 2, 2.9652 as a standard deviation; one wild value changes nothing", () => {
  // check-values.md E14 (statistical function documentation).
  const plain = Object.freeze([1, 2, 3, 4, 5, 6, 7, 8, 9]);
  const wild = Object.freeze([1, 2, 3, 4, 5, 6, 7, 8, 100]);
  expect(medianAbsoluteDeviation(plain)).toBe(2);
  expect(2 * MAD_TO_SIGMA).toBeCloseTo(2.9652, 4);
  expect(medianAbsoluteDeviation(wild)).toBe(2);
  expect(modifiedZ(100, wild)).toBeCloseTo(32.04, 2);
});

test("the scores of a stack with one soft frame", () => {
  // check-values.md E15 (constructed).
  const scores = [812, 790, 805, 798, 310, 801];
  expect(median(scores)).toBe(799.5);
  expect(medianAbsoluteDeviation(scores)).toBe(7.5);
  expect(modifiedZ(310, scores)).toBeCloseTo(-44, 1);
  expect(310 / median(scores)).toBeCloseTo(0.388, 3);
  for (const score of [812, 790, 805, 798, 801]) expect(Math.abs(modifiedZ(score, scores))).toBeLessThan(1.13);
});

test("nothing has no median and no mode", () => {
  expect(median([])).toBeNaN();
  expect(mode([])).toBeUndefined();
});

test("equal values deviate by nothing; of equally frequent values the smaller is the mode", () => {
  expect(modifiedZ(5, [5, 5, 5])).toBe(0);
  expect(modifiedZ(6, [5, 5, 5])).toBe(Infinity);
  expect(mode([7, 3, 7, 3, 1])).toBe(3);
});

test("quantiles are interpolated between order statistics", () => {
  // By hand: a quarter of the way through 0, 10, 20 is 5.
  expect(quantile([20, 0, 10], 0.25)).toBe(5);
});
