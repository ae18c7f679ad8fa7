import { AnalysisError, assertPlane } from "@/lib/analysis/plane";
import type { Plane } from "@/lib/analysis/types";

/** A small picture in full precision. */
export interface FloatPlane {
  readonly data: Float32Array;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Takes a picture row by row, from the top, and gives it back smaller. */
export interface AreaAverager {
  /** Adds the next row: the picture's width in values, from `offset` in `row`. */
  addRow(row: ArrayLike<number>, offset: number): void;
  /** The smaller picture, once all rows are in. */
  finish(): FloatPlane;
}

/** For each output cell along one axis: first and last input cell touched, and how much of these two counts. */
interface Coverage {
  readonly first: Int32Array;
  readonly last: Int32Array;
  readonly firstWeight: Float64Array;
  readonly lastWeight: Float64Array;
}

function coverageAlong(lengthIn: number, lengthOut: number): Coverage {
  const scale = lengthIn / lengthOut;
  const coverage = {
    first: new Int32Array(lengthOut),
    last: new Int32Array(lengthOut),
    firstWeight: new Float64Array(lengthOut),
    lastWeight: new Float64Array(lengthOut),
  };
  for (let cell = 0; cell < lengthOut; cell += 1) {
    const start = cell * scale;
    const end = Math.min(lengthIn, (cell + 1) * scale);
    const first = Math.floor(start);
    const last = Math.max(first, Math.ceil(end) - 1);
    coverage.first[cell] = first;
    coverage.last[cell] = last;
    coverage.firstWeight[cell] = first === last ? end - start : first + 1 - start;
    coverage.lastWeight[cell] = first === last ? 0 : end - last;
  }
  return coverage;
}

/**
 * Makes a picture smaller while it streams by: every output pixel is the mean of the area that it covers, pixels on
 * its border by their share.
 * @param from - the picture's size
 * @param to - 1 px to the picture's size
 * @throws AnalysisError when the target is larger than the picture
 * Method and accuracy: separable box filter with exact fractional coverage; the picture's mean is kept to float32.
 * Edges: the same size gives a copy; NaN spreads to the pixels that cover it.
 * Source: definition.
 */
export function createAreaAverager(
  from: { readonly widthPx: number; readonly heightPx: number },
  to: { readonly widthPx: number; readonly heightPx: number },
): AreaAverager {
  if (!(to.widthPx >= 1 && to.widthPx <= from.widthPx && to.heightPx >= 1 && to.heightPx <= from.heightPx)) {
    throw new AnalysisError(
      `target must lie within ${from.widthPx} x ${from.heightPx} px, got ${to.widthPx} x ${to.heightPx}`,
    );
  }
  const across = coverageAlong(from.widthPx, to.widthPx);
  const down = coverageAlong(from.heightPx, to.heightPx);
  const sums = new Float64Array(to.widthPx * to.heightPx);
  const rowSums = new Float64Array(to.widthPx);
  const scale = (from.widthPx / to.widthPx) * (from.heightPx / to.heightPx);
  let y = 0;
  let cell = 0;
  return {
    addRow(row, offset) {
      reduceRow(row, offset, across, rowSums);
      // A row on the border of two cells goes to both, each by its share.
      while (cell < to.heightPx && (down.first[cell] ?? 0) <= y) {
        const target = cell * to.widthPx;
        const weight = rowWeight(down, cell, y);
        for (let x = 0; x < to.widthPx; x += 1) sums[target + x] = (sums[target + x] ?? 0) + weight * (rowSums[x] ?? 0);
        if ((down.last[cell] ?? 0) > y) break;
        cell += 1;
      }
      y += 1;
    },
    finish: () => ({ data: Float32Array.from(sums, (sum) => sum / scale), ...to }),
  };
}

function rowWeight(down: Coverage, cell: number, y: number): number {
  if (y === down.first[cell]) return down.firstWeight[cell] ?? 0;
  return y === down.last[cell] ? (down.lastWeight[cell] ?? 0) : 1;
}

function reduceRow(row: ArrayLike<number>, offset: number, across: Coverage, rowSums: Float64Array): void {
  for (let x = 0; x < rowSums.length; x += 1) {
    const first = across.first[x] ?? 0;
    const last = across.last[x] ?? 0;
    let inner = 0;
    for (let i = offset + first + 1, end = offset + last; i < end; i += 1) inner += row[i] ?? 0;
    const border =
      (row[offset + first] ?? 0) * (across.firstWeight[x] ?? 0) +
      (row[offset + last] ?? 0) * (across.lastWeight[x] ?? 0);
    rowSums[x] = inner + border;
  }
}

/** `createAreaAverager` for a picture that is there as a whole. */
export function areaAverage(plane: Plane, widthPx: number, heightPx: number): FloatPlane {
  assertPlane(plane);
  const averager = createAreaAverager(plane, { widthPx, heightPx });
  for (let y = 0; y < plane.heightPx; y += 1) averager.addRow(plane.data, y * plane.widthPx);
  return averager.finish();
}

/** Width and height of a picture made smaller until its long side is at most `longSidePx`; never enlarged, never 0. */
export function fitLongSide(
  widthPx: number,
  heightPx: number,
  longSidePx: number,
): { widthPx: number; heightPx: number } {
  const scale = Math.min(1, longSidePx / Math.max(widthPx, heightPx));
  return { widthPx: Math.max(1, Math.round(widthPx * scale)), heightPx: Math.max(1, Math.round(heightPx * scale)) };
}
