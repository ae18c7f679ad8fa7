import { areaAverage, fitLongSide, type FloatPlane } from "@/lib/analysis/area-average";
import type { Plane, RegistrationImage } from "@/lib/analysis/types";

/** Longest side of a registration image; twice that brought nothing (analysis.md step 3). */
export const REGISTRATION_LONG_SIDE_PX = 256;
/** Level of white in a registration image: 16 bits, since rounding to 8 makes false edges in plain sky. */
export const REGISTRATION_LEVELS = 65535;

/**
 * The small grey picture that frames are registered by.
 * @param plane - one channel, upright
 * @param white - the plane's level of white, 255 for 8 bits
 * @returns at most 256 px on its long side, area-averaged, levels 0 to 65 535
 * @throws AnalysisError when the plane is malformed
 * Edges: a picture smaller than 256 px keeps its size.
 */
export function toRegistrationImage(plane: Plane, white: number): RegistrationImage {
  const target = fitLongSide(plane.widthPx, plane.heightPx, REGISTRATION_LONG_SIDE_PX);
  return toLevels(areaAverage(plane, target.widthPx, target.heightPx), white);
}

/** Rounds a small picture to the 16-bit levels of a registration image; `white` is its own level of white. */
export function toLevels(small: FloatPlane, white: number): RegistrationImage {
  const scale = REGISTRATION_LEVELS / white;
  const data = Uint16Array.from(small.data, (value) =>
    Math.round(Math.max(0, Math.min(REGISTRATION_LEVELS, value * scale))),
  );
  return { data, widthPx: small.widthPx, heightPx: small.heightPx };
}
