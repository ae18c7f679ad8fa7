import { expect, test } from "vitest";

import { estimateNoise } from "@/lib/analysis/noise-estimate";
import { makeNormal } from "@/tests/support/random";

// check-values.md E28, after Immerkaer 1996.
test("a single pixel of 54 gives the value worked out by hand", () => {
  const data = new Float64Array(25);
  data[12] = 54;
  // Nine responses whose sizes add up to 16 x 54; sqrt(pi / 2) / (6 x 9) x 864.
  expect(estimateNoise({ data, widthPx: 5, heightPx: 5 })).toBeCloseTo(20.053, 3);
});

test("a ramp has no noise", () => {
  const data = Float64Array.from({ length: 80 }, (_, i) => 3 * (i % 10) + 7 * Math.floor(i / 10));
  expect(estimateNoise({ data, widthPx: 10, heightPx: 8 })).toBeCloseTo(0, 9);
});

test("finds the deviation of white noise to 2 %", () => {
  const normal = makeNormal(4);
  const data = Float64Array.from({ length: 160_000 }, () => 128 + 10 * normal());
  expect(Math.abs(estimateNoise({ data, widthPx: 400, heightPx: 400 }) / 10 - 1)).toBeLessThan(0.02);
});
