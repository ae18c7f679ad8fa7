import { AnalysisError, assertPlane } from "@/lib/analysis/plane";
import type { Plane } from "@/lib/analysis/types";

/** A small picture in full precision. */
export interface FloatPlane {
  readonly data: Float32Array;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** For each output cell along one axis: first and last input cell touched, and how much of the last two counts. */
interface Coverage {
  readonly first: Int32Array;
  readonly last: Int32Array;
  readonly firstWeight: Float64Array;
  readonly lastWeight: Float64Array;
}

function coverageAlong(lengthIn: number, lengthOut: number): Coverage {
  const scale = lengthIn / lengthOut;
  const first = new Int32Array(lengthOut);
  const last = new Int32Array(lengthOut);
  const firstWeight = new Float64Array(lengthOut);
  const lastWeight = new Float64Array(lengthOut);
  for (let cell = 0; cell < lengthOut; cell += 1) {
    const start = cell * scale;
    const end = Math.min(lengthIn, (cell + 1) * scale);
    first[cell] = Math.floor(start);
    last[cell] = Math.max(Math.floor(start), Math.ceil(end) - 1);
    const isOneCell = first[cell] === last[cell];
    firstWeight[cell] = isOneCell ? end - start : Math.floor(start) + 1 - start;
    lastWeight[cell] = isOneCell ? 0 : end - (last[cell] ?? 0);
  }
  return { first, last, firstWeight, lastWeight };
}

/**
 * Makes a picture smaller: every output pixel is the mean of the area that it covers, shared pixels by their share.
 * @param plane - any range
 * @param widthPx - 1 to the plane's width
 * @param heightPx - 1 to the plane's height
 * @returns the smaller picture, in the plane's own levels, not rounded
 * @throws AnalysisError when the plane is malformed or the target is larger than it
 * Method and accuracy: separable box filter with exact fractional coverage; the picture's mean is kept to float32.
 * Edges: the same size gives a copy; NaN spreads to the pixels that cover it.
 * Source: definition.
 */
export function areaAverage(plane: Plane, widthPx: number, heightPx: number): FloatPlane {
  assertPlane(plane);
  if (!(widthPx >= 1 && widthPx <= plane.widthPx && heightPx >= 1 && heightPx <= plane.heightPx)) {
    throw new AnalysisError(
      `target must lie within ${plane.widthPx} x ${plane.heightPx} px, got ${widthPx} x ${heightPx}`,
    );
  }
  const across = coverageAlong(plane.widthPx, widthPx);
  const down = coverageAlong(plane.heightPx, heightPx);
  const data = new Float32Array(widthPx * heightPx);
  const rowSum = new Float64Array(plane.widthPx);
  const scale = (plane.widthPx / widthPx) * (plane.heightPx / heightPx);
  for (let y = 0; y < heightPx; y += 1) {
    sumRows(plane, down, y, rowSum);
    for (let x = 0; x < widthPx; x += 1) {
      const first = across.first[x] ?? 0;
      const last = across.last[x] ?? 0;
      let sum = (rowSum[first] ?? 0) * (across.firstWeight[x] ?? 0);
      for (let i = first + 1; i < last; i += 1) sum += rowSum[i] ?? 0;
      if (last > first) sum += (rowSum[last] ?? 0) * (across.lastWeight[x] ?? 0);
      data[y * widthPx + x] = sum / scale;
    }
  }
  return { data, widthPx, heightPx };
}

function sumRows(plane: Plane, down: Coverage, y: number, rowSum: Float64Array): void {
  const { data, widthPx } = plane;
  const first = down.first[y] ?? 0;
  const last = down.last[y] ?? 0;
  rowSum.fill(0);
  for (let row = first; row <= last; row += 1) {
    const edgeWeight = row === first ? (down.firstWeight[y] ?? 0) : (down.lastWeight[y] ?? 0);
    const weight = row > first && row < last ? 1 : edgeWeight;
    const offset = row * widthPx;
    for (let x = 0; x < widthPx; x += 1) rowSum[x] = (rowSum[x] ?? 0) + weight * (data[offset + x] ?? 0);
  }
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
