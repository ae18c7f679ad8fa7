import { describe, expect, test } from "vitest";

import { measureFrame } from "@/lib/analysis/measure-frame";
import { uprightImage, uprightOrder, uprightSize } from "@/lib/analysis/orientation";
import type { Orientation } from "@/lib/metadata/types";
import { makeRandom } from "@/tests/support/random";

const ALL: readonly Orientation[] = [1, 2, 3, 4, 5, 6, 7, 8];

describe("orientation", () => {
  test.each([
    // check-values.md E39 (Exif).
    [1, 6000, 4000],
    [3, 6000, 4000],
    [6, 4000, 6000],
    [8, 4000, 6000],
  ] as const)("orientation %i shows 6000 x 4000 as %i x %i", (orientation, widthPx, heightPx) => {
    expect(uprightSize(6000, 4000, orientation)).toEqual({ widthPx, heightPx });
  });

  test.each([
    // Stored as 0 1 2 over 3 4 5. Exif 2.2: which side of the scene the stored first row and first column are.
    [1, [0, 1, 2, 3, 4, 5]],
    [2, [2, 1, 0, 5, 4, 3]],
    [3, [5, 4, 3, 2, 1, 0]],
    [4, [3, 4, 5, 0, 1, 2]],
    [5, [0, 3, 1, 4, 2, 5]],
    [6, [3, 0, 4, 1, 5, 2]],
    [7, [5, 2, 4, 1, 3, 0]],
    [8, [2, 5, 1, 4, 0, 3]],
  ] as const)("orientation %i turns a picture as Exif says", (orientation, expected) => {
    expect([...uprightOrder(3, 2, orientation)]).toEqual(expected);
    const image = { data: Uint16Array.of(0, 1, 2, 3, 4, 5), widthPx: 3, heightPx: 2 };
    expect([...uprightImage(image, orientation).data]).toEqual(expected);
  });

  test.each(ALL)("a frame stored in orientation %i measures like the upright one", (orientation) => {
    const random = makeRandom(8);
    const widthPx = 320;
    const heightPx = 192;
    const upright = Uint8Array.from({ length: widthPx * heightPx }, (_, i) => random() * (i % widthPx) * 0.75);
    const stored = store(upright, widthPx, heightPx, orientation);
    const expected = measureFrame({ data: upright, widthPx, heightPx }, 255, 1);
    const measured = measureFrame(stored, 255, orientation);
    expect(measured.registration).toEqual(expected.registration);
    const { patches, ...rest } = measured.measurements;
    const { patches: expectedPatches, ...expectedRest } = expected.measurements;
    expect(rest.laplacianVariance).toBeCloseTo(expectedRest.laplacianVariance, 6);
    expect([rest.widthPx, rest.heightPx, rest.texture]).toEqual([widthPx, heightPx, expectedRest.texture]);
    patches.full.forEach((value, i) => expect(value).toBeCloseTo(expectedPatches.full[i] ?? Number.NaN, 9));
    patches.brightness.forEach((value, i) => expect(value).toBeCloseTo(expectedPatches.brightness[i] ?? Number.NaN, 9));
  });
});

/** What a camera held in this orientation would have stored. */
function store(upright: Uint8Array, widthPx: number, heightPx: number, orientation: Orientation) {
  const size = uprightSize(widthPx, heightPx, orientation);
  const order = uprightOrder(size.widthPx, size.heightPx, orientation);
  const data = new Uint8Array(upright.length);
  order.forEach((stored, shown) => {
    data[stored] = upright[shown] ?? 0;
  });
  return { data, ...size };
}
