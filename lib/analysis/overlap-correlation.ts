import type { FloatPlane } from "@/lib/analysis/area-average";

/** The part of two pictures that lies on top of each other, in pixels of the first. */
export interface Overlap {
  readonly leftPx: number;
  readonly topPx: number;
  readonly widthPx: number;
  readonly heightPx: number;
}

type Sides = Pick<FloatPlane, "widthPx" | "heightPx">;

/** Where b, laid with its top left corner on (x, y) of a, covers a. Width and height are 0 where it does not. */
export function overlapAt(a: Sides, b: Sides, x: number, y: number): Overlap {
  const leftPx = Math.max(0, x);
  const topPx = Math.max(0, y);
  return {
    leftPx,
    topPx,
    widthPx: Math.max(0, Math.min(a.widthPx, x + b.widthPx) - leftPx),
    heightPx: Math.max(0, Math.min(a.heightPx, y + b.heightPx) - topPx),
  };
}

export interface OverlapCorrelation {
  /** Normalised cross-correlation, -1 to 1; 0 where either part is constant or there is no overlap. */
  readonly ncc: number;
  /** Pixels that overlap. */
  readonly samples: number;
  /** Standard deviation of either part, in the pictures' own levels. */
  readonly deviationA: number;
  readonly deviationB: number;
}

/**
 * Normalised cross-correlation of the overlapping parts of two pictures, b's corner on (x, y) of a.
 * @param x - whole pixels of a, any sign
 * @param y - whole pixels of a, any sign
 * Method and accuracy: one pass, float64 sums about 0 (the pictures are high-passed, so their means are small).
 * Edges: no overlap or a constant part gives 0; NaN gives NaN.
 * Source: definition.
 */
export function correlateOverlap(a: FloatPlane, b: FloatPlane, x: number, y: number): OverlapCorrelation {
  const { leftPx, topPx, widthPx, heightPx } = overlapAt(a, b, x, y);
  const samples = widthPx * heightPx;
  if (samples === 0) return { ncc: 0, samples, deviationA: 0, deviationB: 0 };
  const aData = a.data;
  const bData = b.data;
  let sumA = 0;
  let sumB = 0;
  let sumAA = 0;
  let sumBB = 0;
  let sumAB = 0;
  for (let row = 0; row < heightPx; row += 1) {
    let i = (topPx + row) * a.widthPx + leftPx;
    let j = (topPx + row - y) * b.widthPx + leftPx - x;
    for (const end = i + widthPx; i < end; i += 1, j += 1) {
      const valueA = aData[i] ?? 0;
      const valueB = bData[j] ?? 0;
      sumA += valueA;
      sumB += valueB;
      sumAA += valueA * valueA;
      sumBB += valueB * valueB;
      sumAB += valueA * valueB;
    }
  }
  const varianceA = Math.max(0, sumAA / samples - (sumA / samples) ** 2);
  const varianceB = Math.max(0, sumBB / samples - (sumB / samples) ** 2);
  const covariance = sumAB / samples - (sumA / samples) * (sumB / samples);
  const scale = Math.sqrt(varianceA * varianceB);
  return {
    ncc: scale > 0 ? Math.max(-1, Math.min(1, covariance / scale)) : 0,
    samples,
    deviationA: Math.sqrt(varianceA),
    deviationB: Math.sqrt(varianceB),
  };
}
