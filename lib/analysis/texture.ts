import { highPass } from "@/lib/analysis/high-pass";
import { REGISTRATION_LEVELS } from "@/lib/analysis/registration-image";
import type { RegistrationImage } from "@/lib/analysis/types";

/**
 * Standard deviation of fine detail, in levels of 255, from which a place counts as textured. Ours: clear sky and
 * defocused haze stay under 1 at 256 px, foliage, stone and roofs lie between 5 and 25.
 */
export const TEXTURE_LEVEL = 2;
/** Side of the squares that are judged, and radius of the blur they are compared with; px of 256. */
const SQUARE_PX = 16;
const BLUR_RADIUS_PX = 8;

/**
 * Share of a picture that has texture enough to be registered.
 * @param image - 16-bit levels, at most 256 px on its long side
 * @returns 0 (plain sky) to 1
 * @throws AnalysisError when the image is malformed
 * Method and accuracy: squares of 16 px whose high-passed standard deviation is TEXTURE_LEVEL or more.
 * Edges: a constant or linear picture gives 0; squares at the right and lower border may be smaller.
 * Source: our own, after the high-pass of analysis.md step 3.
 */
export function textureShare(image: RegistrationImage): number {
  const { data, widthPx, heightPx } = highPass(image, BLUR_RADIUS_PX);
  const least = (TEXTURE_LEVEL * REGISTRATION_LEVELS) / 255;
  let textured = 0;
  for (let top = 0; top < heightPx; top += SQUARE_PX) {
    for (let left = 0; left < widthPx; left += SQUARE_PX) {
      const right = Math.min(widthPx, left + SQUARE_PX);
      const bottom = Math.min(heightPx, top + SQUARE_PX);
      let sum = 0;
      let squared = 0;
      for (let y = top; y < bottom; y += 1) {
        for (let x = left; x < right; x += 1) {
          const value = data[y * widthPx + x] ?? 0;
          sum += value;
          squared += value * value;
        }
      }
      const pixels = (right - left) * (bottom - top);
      const variance = squared / pixels - (sum / pixels) ** 2;
      if (variance >= least * least) textured += pixels;
    }
  }
  return textured / (widthPx * heightPx);
}
