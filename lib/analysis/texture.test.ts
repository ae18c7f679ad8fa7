import { expect, test } from "vitest";

import { toRegistrationImage } from "@/lib/analysis/registration-image";
import { textureShare } from "@/lib/analysis/texture";
import { makeNormal, makeRandom } from "@/tests/support/random";

const widthPx = 1536;
const heightPx = 1024;

function share(level: (x: number, y: number) => number): number {
  const data = new Float32Array(widthPx * heightPx);
  for (let y = 0; y < heightPx; y += 1) for (let x = 0; x < widthPx; x += 1) data[y * widthPx + x] = level(x, y);
  return textureShare(toRegistrationImage({ data, widthPx, heightPx }, 255));
}

test("a clear sky with a gradient and camera noise has no texture", () => {
  const normal = makeNormal(9);
  expect(share((x, y) => 120 + 0.06 * y + 0.01 * x + 4 * normal())).toBe(0);
});

test("a picture that is half sky and half stone has texture in half", () => {
  const random = makeRandom(10);
  const stones = Float32Array.from({ length: 64 * 64 }, () => 60 + 120 * random());
  const level = (x: number, y: number) => (y < heightPx / 2 ? 180 : (stones[(y >> 4) * 64 + ((x >> 4) % 64)] ?? 0));
  // 171 px high: stone from row 85; the square above the edge may see it through the blur, so textured from 96 to 64.
  expect(share(level)).toBeGreaterThanOrEqual(75 / 171);
  expect(share(level)).toBeLessThanOrEqual(107 / 171);
});
