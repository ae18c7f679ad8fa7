import { createRequire } from "node:module";

import type { RegistrationImage } from "@/lib/analysis/types";

interface GreyImage {
  readonly data: Uint8Array;
  readonly width: number;
  readonly height: number;
  readonly channels: 1;
}

interface ImageSsim {
  compare(first: GreyImage, second: GreyImage): { ssim: number };
}

// image-ssim ships a raw .ts beside its JavaScript that breaks type checks and bundlers: this is its only way in.
const imageSsim = createRequire(import.meta.url)("image-ssim") as ImageSsim;

/** image-ssim's window; a remainder of one pixel would make a window without variance (0 / 0). */
const WINDOW_PX = 8;

/**
 * Structural similarity of two small pictures laid over each other unshifted.
 * @param a - 16-bit levels
 * @param b - 16-bit levels
 * @returns -1 to 1, 1 for equal pictures; 0 where they differ in size or are under 8 px a side (cannot be laid over)
 * Method and accuracy: image-ssim, 8 x 8 px blocks without weighting; ranks as the 11 x 11 Gaussian form does, values differ.
 * Source: Wang, Bovik, Sheikh, Simoncelli, IEEE Trans. Image Processing 13(4), 2004, 600-612, doi:10.1109/TIP.2003.819861.
 */
export function measureSsim(a: RegistrationImage, b: RegistrationImage): number {
  if (a.widthPx !== b.widthPx || a.heightPx !== b.heightPx) return 0;
  if (Math.min(a.widthPx, a.heightPx) < WINDOW_PX) return 0;
  return imageSsim.compare(toGrey(a), toGrey(b)).ssim;
}

function toGrey(image: RegistrationImage): GreyImage {
  const width = image.widthPx - (image.widthPx % WINDOW_PX);
  const height = image.heightPx - (image.heightPx % WINDOW_PX);
  const data = new Uint8Array(width * height);
  for (let y = 0; y < height; y += 1) {
    for (let x = 0; x < width; x += 1) data[y * width + x] = (image.data[y * image.widthPx + x] ?? 0) >> 8;
  }
  return { data, width, height, channels: 1 };
}
