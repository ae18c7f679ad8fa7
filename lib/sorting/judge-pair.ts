import type { PairMeasure } from "@/lib/analysis/types";
import { significanceOf } from "./significance";
import type { SortFrame } from "./types";

/** What the pictures alone say of two frames. */
export type Verdict = "same" | "different" | "probably different" | "unknown";

/** Source of these limits: analysis.md, step 4 (93 simulated shoots). Shifts as fractions of the longer side. */
const LEAST_NCC = 0.35;
const LARGEST_SHIFT_WITHIN = 0.07;
export const LEAST_SHIFT_BETWEEN = 0.13;
const LEAST_TEXTURE = 0.06;
/** Contrast of the overlap, in units of what counts as texture, under which a match may be vignetting. Our own. */
const LEAST_CONTRAST = 1;
/**
 * A match between different tiles rests on a part of the picture only, so it must be clearer: rows of windows in
 * frames turned against each other match at many shifts alike. Our own, after analysis.md, step 5.
 */
const CLEAR_NCC = 0.6;
const LEAST_PEAK_RATIO = 1.3;
const LEAST_PEAK_RATIO_WEAK = 2;
/**
 * A frame turned by 2 degrees correlates with its neighbour by 0.2 to 0.35 only, yet 12 and more standard deviations
 * above chance, which stays under 5. Our own, from generated handheld shoots.
 */
const SURE_SIGNIFICANCE = 8;
/** Rows of windows match at small shifts too, but never as well as the same tile. Our own. */
const SURE_SAME_NCC = 0.8;
/** Chance seldom falls among the few small shifts. */
const SURE_SIGNIFICANCE_WITHIN = 6;
/** Limits for a match in plain sky. Our own, from generated shoots. */
const FAINT_NCC = 0.5;
const FAINT_PEAK_RATIO = 1.4;
const LEAST_FAINT_SHIFT = 0.003;
const SURE_PEAK_RATIO = 1.25;

/** Plain frames of one tile share faint clouds and shading: 20 and more; of different tiles seldom 9. Our own. */
const ALIKE_SIGNIFICANCE = 15;
const UNLIKE_SIGNIFICANCE = 9;

/** Length of a pair's shift as a fraction of the frame's longer side. */
export function shiftFraction(measure: PairMeasure, frame: SortFrame): number {
  const { widthPx, heightPx } = frame.measurements;
  return Math.hypot(measure.xPx, measure.yPx) / Math.max(widthPx, heightPx);
}

/** Whether a shift is larger than frames of one tile lie apart. @param shift - px of the frame */
export function isFarApart(
  shift: { readonly xPx: number; readonly yPx: number },
  frame: Pick<SortFrame, "measurements">,
): boolean {
  const { widthPx, heightPx } = frame.measurements;
  return Math.hypot(shift.xPx, shift.yPx) / Math.max(widthPx, heightPx) > LEAST_SHIFT_BETWEEN;
}

export function isTextured(frame: SortFrame): boolean {
  return frame.measurements.texture >= LEAST_TEXTURE;
}

/** True where the measured shift is no chance. */
export function isMatch(measure: PairMeasure, frame: SortFrame): boolean {
  if (measure.contrast < LEAST_CONTRAST) return isFaintMatch(measure, frame);
  if (measure.ncc >= LEAST_NCC) return true;
  const isNear = shiftFraction(measure, frame) < LARGEST_SHIFT_WITHIN;
  const least = isNear ? SURE_SIGNIFICANCE_WITHIN : SURE_SIGNIFICANCE;
  return significanceOf(measure, frame) >= least && measure.peakRatio >= SURE_PEAK_RATIO;
}

/** Shading and dust match at no shift at all, whatever is in view: a faint match proves something only if it moved. */
function isFaintMatch(measure: PairMeasure, frame: SortFrame): boolean {
  const shift = shiftFraction(measure, frame);
  if (shift < LEAST_FAINT_SHIFT) return false;
  if (measure.ncc < FAINT_NCC) return false;
  return shift < LARGEST_SHIFT_WITHIN || measure.peakRatio >= FAINT_PEAK_RATIO;
}

/** Judges two frames by their pictures: the same tile, another one, or no saying. */
export function judgePair(a: SortFrame, b: SortFrame, measure: PairMeasure): Verdict {
  const isPlain = !isTextured(a) || !isTextured(b) || measure.contrast < LEAST_CONTRAST;
  const shift = shiftFraction(measure, a);
  if (isMatch(measure, a)) {
    if (shift < LARGEST_SHIFT_WITHIN) {
      const isDoubtful = !isPlain && measure.ncc < SURE_SAME_NCC && measure.peakRatio < SURE_PEAK_RATIO;
      return isDoubtful ? "unknown" : "same";
    }
    if (shift <= LEAST_SHIFT_BETWEEN) return "unknown";
    if (isPlain && measure.peakRatio < FAINT_PEAK_RATIO) return "unknown";
    const isClear = measure.peakRatio >= (measure.ncc >= CLEAR_NCC ? LEAST_PEAK_RATIO : LEAST_PEAK_RATIO_WEAK);
    if (isClear) return "different";
  }
  return isPlain ? "unknown" : "probably different";
}

/** What a plain pair's shift proves: enough to be alike, too little to be, or neither. */
export function leaningOf(measure: PairMeasure, frame: SortFrame): "alike" | "unlike" | "neither" {
  const significance = significanceOf(measure, frame);
  const isNear = shiftFraction(measure, frame) < LARGEST_SHIFT_WITHIN;
  if (isNear && significance >= ALIKE_SIGNIFICANCE) return "alike";
  return significance < UNLIKE_SIGNIFICANCE ? "unlike" : "neither";
}
