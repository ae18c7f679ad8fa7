import { basename } from "node:path";
import sharp from "sharp";
import { beforeAll, describe, expect, test } from "vitest";

import { createPairMeasurer } from "@/lib/analysis/pair-measurer";
import { toRegistrationImage } from "@/lib/analysis/registration-image";
import type { Plane } from "@/lib/analysis/types";
import { measureSsim } from "@/lib/imaging/structural-similarity";
import { analysePicture } from "@/lib/imaging/analyse-picture";
import { listShared, hasShared } from "@/tests/support/shared-data";
import { loadOpenCv, type OpenCv } from "@/tests/support/open-cv";

const LONG_SIDE_PX = 768;
const planes = new Map<string, Promise<Plane>>();

function planeOf(path: string): Promise<Plane> {
  const known = planes.get(path);
  if (known) return known;
  const plane = sharp(path)
    .resize(LONG_SIDE_PX, LONG_SIDE_PX, { fit: "inside" })
    .extractChannel(1)
    .raw()
    .toBuffer({ resolveWithObject: true })
    .then(({ data, info }) => ({ data: new Uint8Array(data), widthPx: info.width, heightPx: info.height }));
  planes.set(path, plane);
  return plane;
}

/** Shifts here are in pixels of the 768 px picture. */
const measurePair = createPairMeasurer({
  load: async (path) => {
    const plane = await planeOf(path);
    return { image: toRegistrationImage(plane, 255), widthPx: plane.widthPx, heightPx: plane.heightPx };
  },
  measureSsim,
});

describe.skipIf(!hasShared("overlap-3"))("overlapping photographs (skipped where the shared data is absent)", () => {
  let cv: OpenCv;
  beforeAll(async () => {
    ({ cv } = await loadOpenCv());
  });

  const files = listShared("overlap-3").filter((path) => /jpe?g$/i.test(path));
  const neighbours = files.flatMap((path, i) => (i % 3 === 2 ? [] : [[path, files[i + 1] ?? ""] as const]));
  const named = neighbours.map(([a, b]) => [basename(a), basename(b), a, b] as const);

  test.each(named)("%s and %s lie where OpenCV finds them", async (_a, _b, aPath, bPath) => {
    const [a, b] = [await planeOf(aPath), await planeOf(bPath)];
    const measured = await measurePair(aPath, bPath);
    expect(measured.ncc).toBeGreaterThan(0.2);
    expect(measured.peakRatio).toBeGreaterThan(1.3);
    // The middle half of the overlap, cut from b, is searched in all of a.
    const left = Math.max(0, -measured.xPx);
    const top = Math.max(0, -measured.yPx);
    const width = a.widthPx - Math.abs(measured.xPx);
    const height = a.heightPx - Math.abs(measured.yPx);
    const part = { x: left + width / 4, y: top + height / 4, width: width / 2, height: height / 2 };
    const found = findPart(cv, a, b, {
      x: Math.round(part.x),
      y: Math.round(part.y),
      width: Math.round(part.width),
      height: Math.round(part.height),
    });
    expect(found.score).toBeGreaterThan(0.4);
    // Hand-held or turned on a head: the shift differs over the picture by 2 % of its side or so.
    expect(Math.abs(found.x - Math.round(part.x) - measured.xPx)).toBeLessThan(0.025 * LONG_SIDE_PX);
    expect(Math.abs(found.y - Math.round(part.y) - measured.yPx)).toBeLessThan(0.025 * LONG_SIDE_PX);
  });

  test("each triplet runs one way, as README.md of the data says", async () => {
    for (let i = 0; i < files.length; i += 3) {
      const [first = "", second = "", third = ""] = files.slice(i, i + 3);
      const [one, two] = [await measurePair(first, second), await measurePair(second, third)];
      const along = Math.abs(one.xPx) > Math.abs(one.yPx) ? "xPx" : "yPx";
      expect(Math.sign(one[along])).toBe(Math.sign(two[along]));
      expect(Math.abs(one[along])).toBeGreaterThan(0.1 * LONG_SIDE_PX);
    }
  });
});

interface Part {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

/** Where OpenCV's matchTemplate (normalised correlation coefficient) finds a part of b in a. */
function findPart(cv: OpenCv, a: Plane, b: Plane, part: Part): { x: number; y: number; score: number } {
  const picture = cv.matFromArray(a.heightPx, a.widthPx, cv.CV_8UC1, a.data);
  const other = cv.matFromArray(b.heightPx, b.widthPx, cv.CV_8UC1, b.data);
  const cut = other.roi(new cv.Rect(part.x, part.y, part.width, part.height));
  const result = new cv.Mat();
  cv.matchTemplate(picture, cut, result, cv.TM_CCOEFF_NORMED);
  const { maxVal, maxLoc } = cv.minMaxLoc(result);
  for (const mat of [picture, other, cut, result]) mat.delete();
  return { x: maxLoc.x, y: maxLoc.y, score: maxVal };
}

describe.skipIf(!hasShared("blur-3"))("sharp and blurred photographs (skipped where the shared data is absent)", () => {
  const files = listShared("blur-3").filter((path) => /jpe?g$/i.test(path));
  const scenes = [...new Set(files.map((path) => basename(path).replace(/_[FMS]\.jpe?g$/i, "")))];

  test.each(scenes)("%s: the sharp one is sharpest, over the picture and patch by patch", async (scene) => {
    const none = { previewPath: null, thumbnailPath: null, registrationPath: null };
    const measured = await Promise.all(
      ["S", "F", "M"].map(async (kind) => {
        const path = files.find((file) => basename(file).startsWith(`${scene}_${kind}.`)) ?? "";
        return (await analysePicture({ path, ...none })).measurements;
      }),
    );
    const [sharpOne, ...blurred] = measured;
    for (const other of blurred) {
      expect(sharpOne?.laplacianVariance).toBeGreaterThan(5 * (other?.laplacianVariance ?? Number.NaN));
      for (const size of ["full", "half"] as const) {
        // analysis.md step 7: the median log ratio over the upper half of the patches, by texture; under -0.20 is soft.
        const patches = sharpOne?.patches[size] ?? [];
        const least = median(patches);
        const ratios = patches.map((value, i) => Math.log((other?.patches[size][i] ?? Number.NaN) / value));
        expect(median(ratios.filter((_, i) => (patches[i] ?? 0) >= least))).toBeLessThan(-0.2);
      }
    }
  });
});

function median(values: readonly number[]): number {
  return values.toSorted((first, second) => first - second)[Math.floor(values.length / 2)] ?? Number.NaN;
}
