import type { PairMeasure } from "@/lib/analysis/types";
import type { SortFrame } from "./types";

const REGISTRATION_LONG_SIDE_PX = 256;
/** Neighbouring pixels are alike, so about twelve count as one sample. Source: analysis.md, step 3. */
const PIXELS_PER_SAMPLE = 12;
/** atanh(ncc) in standard deviations of chance, for the overlap that the shift leaves. 0 where they do not overlap. */
export function significanceOf(measure: PairMeasure, frame: SortFrame): number {
  const { widthPx, heightPx } = frame.measurements;
  const shareX = Math.max(0, 1 - Math.abs(measure.xPx) / widthPx);
  const shareY = Math.max(0, 1 - Math.abs(measure.yPx) / heightPx);
  const scale = REGISTRATION_LONG_SIDE_PX / Math.max(widthPx, heightPx);
  const samples = (widthPx * heightPx * scale ** 2 * shareX * shareY) / PIXELS_PER_SAMPLE;
  return Math.atanh(Math.min(0.999, Math.max(-0.999, measure.ncc))) * Math.sqrt(samples);
}
