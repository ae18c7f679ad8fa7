import type { PairMeasure } from "@/lib/analysis/types";
import { isTextured } from "./judge-pair";
import { significanceOf } from "./significance";
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
  /** Other shifts that the pictures allow, with their weights. */
  readonly rivals: readonly { readonly x: number; readonly y: number; readonly weight: number }[];
  /** Too little detail in the overlap for its shift to be measured well. */
  readonly isFaint: boolean;
  /** Weight of the edge's word where edges contradict each other. */
  readonly weight: number;
  /** Whole steps that are a fact already (both ends were placed before); null: to be read off x and y. */
  readonly steps: { readonly columns: number; readonly rows: number } | null;
}

/** Chance reaches 4.5 among 153 pairs of one shoot (measured on the aerial photographs in shared/data/grid-18). */
const LEAST_SIGNIFICANCE = 4.6;
const LEAST_PEAK_RATIO = 1.2;
/** A clear match needs no clear rival peak. Our own, from the same photographs. */
const SURE_SIGNIFICANCE = 8;
const SURE_PEAK_RATIO = 1.08;
/** Source: analysis.md, step 5. */
const LEAST_NCC_WHERE_PLAIN = 0.6;
const LEAST_CONTRAST = 1;
/** Among house fronts the true shift may have equals; as good a match as this is heard all the same, if softly. Our own. */
const LIKELY_NCC = 0.6;
const LEAST_CLEARNESS = 0.06;
/** Where chance begins to be frequent. */
const CHANCE = 4;
/** Beyond this an edge is as sure as any. */
const HIGHEST_WEIGHT = 30;

/** The edge between two references; null where the measurement proves nothing. */
export function makeEdge(
  a: { index: number; frame: SortFrame },
  b: { index: number; frame: SortFrame },
  measure: PairMeasure,
): Edge | null {
  const significance = significanceOf(measure, a.frame);
  const rivals = measure.rivals ?? [];
  const isClear = significance >= LEAST_SIGNIFICANCE && measure.peakRatio >= LEAST_PEAK_RATIO;
  const leastRatio = measure.ncc >= LIKELY_NCC ? 1 : SURE_PEAK_RATIO;
  const isSure = significance >= SURE_SIGNIFICANCE && measure.peakRatio >= leastRatio;
  if (!isClear && !isSure) return null;
  const isPlain = !isTextured(a.frame) || !isTextured(b.frame) || measure.contrast < LEAST_CONTRAST;
  if (isPlain && measure.ncc < LEAST_NCC_WHERE_PLAIN) return null;
  const longSidePx = Math.max(a.frame.measurements.widthPx, a.frame.measurements.heightPx);
  const clearness = Math.min(1, Math.max(LEAST_CLEARNESS, (measure.peakRatio - 1) / 0.5));
  const share = clearness * (isPlain ? 0.3 : 1);
  return {
    a: a.index,
    b: b.index,
    x: measure.xPx / longSidePx,
    y: measure.yPx / longSidePx,
    ncc: measure.ncc,
    significance,
    isFaint: measure.contrast < LEAST_CONTRAST,
    weight: share * weightOf(significance),
    rivals: rivals.map(({ xPx, yPx, ncc }) => ({
      x: xPx / longSidePx,
      y: yPx / longSidePx,
      weight: share * weightOf(significanceOf({ ...measure, xPx, yPx, ncc }, a.frame)),
    })),
    steps: null,
  };
}

/** Edges up to two deviations above chance count only in part. */
function weightOf(significance: number): number {
  return Math.min(significance, HIGHEST_WEIGHT) * Math.min(1, Math.max(0, significance - CHANCE) / 2);
}
