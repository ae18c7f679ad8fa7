import { describe, expect, test } from "vitest";
import { expectedNoise } from "./expected-noise";

// check-values.md 2.3 and E18 (J. Kasson's weblog for the mean, Cross Validated 468688 for the median).
const MEAN = [1, 0.7071, 0.5774, 0.5, 0.4472, 0.4082, 0.378, 0.3536];
const MEDIAN = [1, 0.7071, 0.6698, 0.5461, 0.5356, 0.4634, 0.4587, 0.4101];

describe("expectedNoise", () => {
  test.each(MEAN.map((noise, at) => [at + 1, noise, MEDIAN[at] ?? 0]))(
    "of %i frames: %f, %f",
    (frames, mean, median) => {
      expect(expectedNoise(frames, "mean")).toBeCloseTo(mean, 4);
      // The efficiencies are known to three digits, so the noise is to about 4e-4.
      expect(Math.abs(expectedNoise(frames, "median") - median)).toBeLessThan(4e-4);
    },
  );

  test("4 frames halve the noise by the mean, 6 by the median", () => {
    // check-values.md E19.
    const least = (merge: "mean" | "median") => [1, 2, 3, 4, 5, 6, 7, 8].find((n) => expectedNoise(n, merge) <= 0.5);
    expect(least("mean")).toBe(4);
    expect(least("median")).toBe(6);
  });

  test("3 frames beside 8 differ by 1.63", () => {
    // check-values.md E50.
    expect(expectedNoise(3, "mean") / expectedNoise(8, "mean")).toBeCloseTo(1.63, 2);
  });

  test.each([0, -1, 1.5, Number.NaN])("%f frames are refused", (frames) => {
    expect(() => expectedNoise(frames, "mean")).toThrow(RangeError);
  });
});
