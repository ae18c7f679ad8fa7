import { describe, expect, test } from "vitest";

import { laplacianVariance } from "@/lib/analysis/laplacian-variance";
import { measurePatchSharpness } from "@/lib/analysis/patch-sharpness";
import { AnalysisError } from "@/lib/analysis/plane";
import type { Plane } from "@/lib/analysis/types";
import { makeNormal, makeRandom } from "@/tests/support/random";

function plane(
  widthPx: number,
  heightPx: number,
  value: (x: number, y: number) => number,
): Plane & { data: Float64Array } {
  const data = new Float64Array(widthPx * heightPx);
  for (let y = 0; y < heightPx; y += 1) for (let x = 0; x < widthPx; x += 1) data[y * widthPx + x] = value(x, y);
  return { data, widthPx, heightPx };
}

function bytes(source: Plane): Plane {
  return { ...source, data: Uint8Array.from(source.data) };
}

describe("laplacianVariance", () => {
  // check-values.md E25 and E26, from the definition; worked by hand for the single pixel: responses 1 1 1 1 -4 0 0 0 0
  // over 9 inner pixels, mean 0, mean square 20/9.
  const single = (level: number) => plane(5, 5, (x, y) => (x === 2 && y === 2 ? level : 0));
  test.each([
    ["a single pixel of level 1", single(1), 20 / 9],
    ["a single pixel of level 255", single(255), 144_500],
    ["a constant picture", plane(7, 6, () => 93), 0],
    ["a ramp", plane(9, 8, (x, y) => 3 * x + 5 * y), 0],
    ["a step of 255", plane(6, 6, (x) => (x < 3 ? 0 : 255)), 32_512.5],
    ["the same edge over three pixels", plane(6, 6, (x) => [0, 0, 85, 170, 255, 255][x] ?? 0), 3_612.5],
  ])("%s has the value worked out by hand", (_name, picture, expected) => {
    expect(laplacianVariance(picture)).toBeCloseTo(expected, 6);
  });

  test("white noise of sigma 5 gives 20 sigma squared", () => {
    // E27: the kernel's squared coefficients add up to 20; 2 % is what 400 x 400 samples allow.
    const normal = makeNormal(1);
    const value = laplacianVariance(plane(400, 400, () => 100 + 5 * normal()));
    expect(Math.abs(value / 500 - 1)).toBeLessThan(0.02);
  });

  test("adding a constant changes nothing, multiplying by c multiplies by c squared", () => {
    const random = makeRandom(2);
    const picture = plane(20, 15, () => Math.floor(random() * 60));
    const value = laplacianVariance(picture);
    expect(laplacianVariance({ ...picture, data: picture.data.map((v) => v + 40) })).toBeCloseTo(value, 8);
    expect(laplacianVariance({ ...picture, data: picture.data.map((v) => 3 * v) })).toBeCloseTo(9 * value, 6);
  });

  test("refuses what has no inner pixel, and data that does not fit", () => {
    expect(() => laplacianVariance(plane(2, 5, () => 0))).toThrow(AnalysisError);
    expect(() => laplacianVariance({ data: new Uint8Array(8), widthPx: 3, heightPx: 3 })).toThrow("3 x 3");
  });

  test("a value that is no number spreads to the result", () => {
    expect(laplacianVariance(plane(5, 5, (x) => (x === 2 ? Number.NaN : 1)))).toBeNaN();
  });
});

describe("measurePatchSharpness", () => {
  const random = makeRandom(3);
  test.each([
    [3, 3],
    [4, 4],
    [5, 9],
    [17, 13],
    [33, 64],
    [101, 50],
    [1203, 40],
  ])("finds the same variance as the plain way at %i x %i px", (widthPx, heightPx) => {
    const picture = bytes(plane(widthPx, heightPx, () => random() * 256));
    const expected = laplacianVariance(picture);
    expect(measurePatchSharpness(picture, 255).laplacianVariance).toBeCloseTo(expected, 6);
    const deep: Plane = { ...picture, data: Uint16Array.from(picture.data, (level) => level * 257) };
    expect(measurePatchSharpness(deep, 65535).laplacianVariance).toBeCloseTo(expected, 6);
  });

  test("each patch has the variance of its own pixels over its brightness squared", () => {
    // 192 x 96 px: patches of 12 x 8 px. Patch column 3, row 2, with the pixels around it, measured by itself.
    const picture = bytes(plane(192, 96, (x, y) => (7 * x + 13 * y + ((x * y) % 31)) % 256));
    const { patches } = measurePatchSharpness(picture, 255);
    expect([patches.columns, patches.rows]).toEqual([16, 12]);
    const around = plane(14, 10, (x, y) => picture.data[(2 * 8 - 1 + y) * 192 + 3 * 12 - 1 + x] ?? 0);
    const inside = plane(12, 8, (x, y) => around.data[(y + 1) * 14 + x + 1] ?? 0);
    const brightness = inside.data.reduce((sum, v) => sum + v, 0) / inside.data.length;
    expect(patches.brightness[2 * 16 + 3]).toBeCloseTo(brightness, 9);
    expect(patches.full[2 * 16 + 3]).toBeCloseTo(laplacianVariance(around) / brightness ** 2, 9);
  });

  test("half size is the mean of 2 x 2 pixels", () => {
    const picture = bytes(plane(64, 48, (x, y) => (11 * x + 5 * y + ((x * y) % 17)) % 200));
    const half = plane(32, 24, (x, y) => {
      const i = 2 * y * 64 + 2 * x;
      return [i, i + 1, i + 64, i + 65].reduce((sum, at) => sum + (picture.data[at] ?? 0), 0) / 4;
    });
    // Patch column 5, row 6 of 16 x 12: half-size pixels 10 and 11 by 12 and 13, with those around them.
    const around = plane(4, 4, (x, y) => half.data[(11 + y) * 32 + 9 + x] ?? 0);
    const { patches } = measurePatchSharpness(picture, 255);
    const brightness = patches.brightness[6 * 16 + 5] ?? 0;
    expect(patches.half[6 * 16 + 5]).toBeCloseTo(laplacianVariance(around) / brightness ** 2, 9);
  });

  test("half the exposure gives the same relative sharpness", () => {
    const bright = bytes(plane(160, 120, (x, y) => 100 + 2 * ((x * 7 + y * 3) % 40)));
    const dark: Plane = { ...bright, data: bright.data.map((level) => level / 2) };
    const one = measurePatchSharpness(bright, 255).patches.full;
    const other = measurePatchSharpness(dark, 255).patches.full;
    one.forEach((value, i) => expect(other[i]).toBeCloseTo(value, 9));
  });

  test("a portrait picture has its 16 patches along the height", () => {
    const { patches } = measurePatchSharpness(bytes(plane(60, 90, (x) => x)), 255);
    expect([patches.columns, patches.rows]).toEqual([12, 16]);
  });

  test("a black picture gives 0, not a division by nothing", () => {
    const { patches, laplacianVariance: variance } = measurePatchSharpness(bytes(plane(40, 30, () => 0)), 255);
    expect(variance).toBe(0);
    expect(patches.full.every((value) => value === 0)).toBe(true);
  });
});
