import { describe, expect, test } from "vitest";

import { measureSsim } from "@/lib/imaging/structural-similarity";
import { makeRandom } from "@/tests/support/random";

/** An 8 x 8 picture, one window of image-ssim, of 8-bit levels in the 16 bits of a registration image. */
function picture(level: (i: number) => number, side = 8) {
  return { data: Uint16Array.from({ length: side * side }, (_, i) => level(i) << 8), widthPx: side, heightPx: side };
}

/** Wang et al. 2004, formula 13, over one window; image-ssim divides the variances by n - 1, the paper's figures by n. */
function oneWindow(x: readonly number[], y: readonly number[], divisor: number): number {
  const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const [mx, my] = [mean(x), mean(y)];
  const product = (s: readonly number[], ms: number, t: readonly number[], mt: number) =>
    s.reduce((sum, value, i) => sum + (value - ms) * ((t[i] ?? 0) - mt), 0) / divisor;
  const [c1, c2] = [6.5025, 58.5225];
  return (
    ((2 * mx * my + c1) * (2 * product(x, mx, y, my) + c2)) /
    ((mx * mx + my * my + c1) * (product(x, mx, x, mx) + product(y, my, y, my) + c2))
  );
}

describe("measureSsim", () => {
  test.each([
    // check-values.md E29 (Wang 2004): constant pictures.
    [100, 110, 0.995476],
    [50, 100, 0.800104],
    [0, 255, 0.0001],
    [77, 77, 1],
  ])("constant %i against constant %i is %f", (a, b, expected) => {
    expect(
      measureSsim(
        picture(() => a),
        picture(() => b),
      ),
    ).toBeCloseTo(expected, 6);
  });

  test("the one-window formula gives the worked values, and image-ssim that formula", () => {
    // check-values.md E30 (Wang 2004): variances over n. image-ssim's own n - 1 is checked against the same formula.
    expect(oneWindow([0, 0, 255, 255], [255, 255, 0, 0], 4)).toBeCloseTo(-0.996406, 6);
    expect(oneWindow([0, 0, 200, 200], [50, 50, 150, 150], 4)).toBeCloseTo(0.800932, 6);
    const random = makeRandom(12);
    const x = Array.from({ length: 64 }, () => Math.floor(random() * 256));
    const y = x.map((level) => Math.floor((level + random() * 255) / 2));
    const measured = measureSsim(
      picture((i) => x[i] ?? 0),
      picture((i) => y[i] ?? 0),
    );
    expect(measured).toBeCloseTo(oneWindow(x, y, 63), 6);
  });

  test("pictures of two sizes, or smaller than a window, are not compared", () => {
    expect(
      measureSsim(
        picture(() => 9),
        picture(() => 9, 16),
      ),
    ).toBe(0);
    expect(
      measureSsim(
        picture(() => 9, 5),
        picture(() => 9, 5),
      ),
    ).toBe(0);
  });

  test("a remainder of one pixel does not spoil the value", () => {
    expect(
      measureSsim(
        picture((i) => i % 200, 17),
        picture((i) => i % 200, 17),
      ),
    ).toBeCloseTo(1, 9);
  });
});
