import type { FloatPlane } from "@/lib/analysis/area-average";
import { assertPlane } from "@/lib/analysis/plane";
import type { Plane } from "@/lib/analysis/types";

/**
 * Fine detail of a picture: its difference from a box blur.
 * @param plane - any range, 1 px or more a side
 * @param radiusPx - the box is `2 * radiusPx + 1` px wide; whole number, 1 or more
 * @returns detail in the plane's own levels, mean about 0
 * @throws AnalysisError when the plane is malformed
 * Method and accuracy: two running sums in float64, linear in the number of pixels.
 * Edges: the picture is continued linearly beyond its border (v(-k) = 2 v(0) - v(k)), so that a ramp gives 0 everywhere
 * and a gradient of the sky leaves no false edge along the border; a constant gives 0; any NaN spoils its row and column.
 * Source: analysis.md step 3 (measured on simulated shoots there).
 */
export function highPass(plane: Plane, radiusPx: number): FloatPlane {
  assertPlane(plane);
  const { widthPx, heightPx } = plane;
  const across = blurRows(new Float64Array(plane.data), widthPx, heightPx, radiusPx);
  const down = transpose(
    blurRows(transpose(across, widthPx, heightPx), heightPx, widthPx, radiusPx),
    heightPx,
    widthPx,
  );
  const data = new Float32Array(widthPx * heightPx);
  for (let i = 0; i < data.length; i += 1) data[i] = (plane.data[i] ?? 0) - (down[i] ?? 0);
  return { data, widthPx, heightPx };
}

function blurRows(data: Float64Array, widthPx: number, heightPx: number, radiusPx: number): Float64Array {
  const result = new Float64Array(data.length);
  const windowPx = 2 * radiusPx + 1;
  const padded = new Float64Array(widthPx + 2 * radiusPx + 1);
  for (let y = 0; y < heightPx; y += 1) {
    extendRow(data, y * widthPx, widthPx, radiusPx, padded);
    let sum = 0;
    for (let i = 0; i < windowPx; i += 1) sum += padded[i] ?? 0;
    for (let x = 0; x < widthPx; x += 1) {
      result[y * widthPx + x] = sum / windowPx;
      sum += (padded[x + windowPx] ?? 0) - (padded[x] ?? 0);
    }
  }
  return result;
}

/** Copies one row into `padded`, continued linearly on both sides; a row shorter than the radius repeats its far end. */
function extendRow(data: Float64Array, offset: number, widthPx: number, radiusPx: number, padded: Float64Array): void {
  const last = widthPx - 1;
  const left = data[offset] ?? 0;
  const right = data[offset + last] ?? 0;
  for (let x = 0; x < widthPx; x += 1) padded[radiusPx + x] = data[offset + x] ?? 0;
  for (let k = 1; k <= radiusPx; k += 1) {
    const inside = Math.min(k, last);
    padded[radiusPx - k] = 2 * left - (data[offset + inside] ?? 0);
    padded[radiusPx + last + k] = 2 * right - (data[offset + last - inside] ?? 0);
  }
}

function transpose(data: Float64Array, widthPx: number, heightPx: number): Float64Array {
  const result = new Float64Array(data.length);
  for (let y = 0; y < heightPx; y += 1) {
    for (let x = 0; x < widthPx; x += 1) result[x * heightPx + y] = data[y * widthPx + x] ?? 0;
  }
  return result;
}
