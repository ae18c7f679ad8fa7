import type { PairMeasure } from "@/lib/analysis/types";
import { isTextured } from "./judge-pair";
import type { SortFrame } from "./types";

/** How two stacks' references lie to each other. */
export interface Edge {
  readonly a: number;
  readonly b: number;
  /** Corner of b in a, in long sides of a frame; right and down positive. */
  readonly x: number;
  readonly y: number;
  readonly ncc: number;
  /** How far the correlation stands above chance, in standard deviations: 5 is seldom wrong. */
  readonly significance: number;
  /** Weight of the edge's word where edges contradict each other. */
  readonly weight: number;
  /** Whole steps that are a fact already (both ends were placed before); null: to be read off x and y. */
  readonly steps: { readonly columns: number; readonly rows: number } | null;
}

const REGISTRATION_LONG_SIDE_PX = 256;
/** Neighbouring pixels are alike, so about twelve count as one sample. Source: analysis.md, step 3. */
const PIXELS_PER_SAMPLE = 12;
/** Chance reaches 4.5 among 153 pairs of one shoot (measured on the aerial photographs in shared/data/grid-18). */
const LEAST_SIGNIFICANCE = 4.6;
const LEAST_PEAK_RATIO = 1.2;
/** A clear match needs no clear rival peak. Our own, from the same photographs. */
const SURE_SIGNIFICANCE = 8;
const SURE_PEAK_RATIO = 1.08;
/** Source: analysis.md, step 5. */
const LEAST_NCC_WHERE_PLAIN = 0.6;
const LEAST_CONTRAST = 1;
/** Beyond this an edge is as sure as any. */
const HIGHEST_WEIGHT = 30;

/** atanh(ncc) in standard deviations of chance, for the overlap that the shift leaves. 0 where they do not overlap. */
export function significanceOf(measure: PairMeasure, frame: SortFrame): number {
  const { widthPx, heightPx } = frame.measurements;
  const shareX = Math.max(0, 1 - Math.abs(measure.xPx) / widthPx);
  const shareY = Math.max(0, 1 - Math.abs(measure.yPx) / heightPx);
  const scale = REGISTRATION_LONG_SIDE_PX / Math.max(widthPx, heightPx);
  const samples = (widthPx * heightPx * scale ** 2 * shareX * shareY) / PIXELS_PER_SAMPLE;
  return Math.atanh(Math.min(0.999, Math.max(-0.999, measure.ncc))) * Math.sqrt(samples);
}

/** The edge between two references; null where the measurement proves nothing. */
export function makeEdge(
  a: { index: number; frame: SortFrame },
  b: { index: number; frame: SortFrame },
  measure: PairMeasure,
): Edge | null {
  const significance = significanceOf(measure, a.frame);
  const isClear = significance >= LEAST_SIGNIFICANCE && measure.peakRatio >= LEAST_PEAK_RATIO;
  const isSure = significance >= SURE_SIGNIFICANCE && measure.peakRatio >= SURE_PEAK_RATIO;
  if (!isClear && !isSure) return null;
  const isPlain = !isTextured(a.frame) || !isTextured(b.frame) || measure.contrast < LEAST_CONTRAST;
  if (isPlain && measure.ncc < LEAST_NCC_WHERE_PLAIN) return null;
  const longSidePx = Math.max(a.frame.measurements.widthPx, a.frame.measurements.heightPx);
  const clearness = Math.min(1, (measure.peakRatio - 1) / 0.5);
  return {
    a: a.index,
    b: b.index,
    x: measure.xPx / longSidePx,
    y: measure.yPx / longSidePx,
    ncc: measure.ncc,
    significance,
    weight: Math.min(significance, HIGHEST_WEIGHT) * clearness * (isPlain ? 0.3 : 1),
    steps: null,
  };
}
