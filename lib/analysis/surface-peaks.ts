import { overlapAt } from "@/lib/analysis/overlap-correlation";

/** A local maximum of a phase correlation surface. */
export interface SurfacePeak {
  /** Where b's corner lies in a, whole pixels. */
  readonly x: number;
  readonly y: number;
  readonly height: number;
}

interface Sides {
  readonly widthPx: number;
  readonly heightPx: number;
}

/**
 * The highest local maxima of a cyclic surface at which the two pictures overlap enough.
 * @param surface - as `phaseCorrelation` returns it, `sidePx` squared values
 * @param leastOverlap - share of the smaller picture's area, 0 to 1
 * @param count - how many at most
 * @returns highest first; equal heights in the order of y, then x
 * Method and accuracy: a maximum is higher than its 8 neighbours (cyclic); whole pixels.
 * Edges: a flat surface has no maximum.
 */
export function findPeaks(
  surface: Float32Array,
  sidePx: number,
  pictures: { readonly a: Sides; readonly b: Sides; readonly leastOverlap: number; readonly count: number },
): SurfacePeak[] {
  const { a, b, leastOverlap, count } = pictures;
  const leastSamples = leastOverlap * Math.min(a.widthPx * a.heightPx, b.widthPx * b.heightPx);
  const peaks: SurfacePeak[] = [];
  for (let y = 1 - b.heightPx; y < a.heightPx; y += 1) {
    for (let x = 1 - b.widthPx; x < a.widthPx; x += 1) {
      const height = surface[index(x, y, sidePx)] ?? 0;
      if (height <= (peaks[count - 1]?.height ?? 0)) continue;
      const overlap = overlapAt(a, b, x, y);
      if (overlap.widthPx * overlap.heightPx < leastSamples || !isMaximum(surface, sidePx, x, y)) continue;
      insertPeak(peaks, { x, y, height }, count);
    }
  }
  return peaks;
}

function index(x: number, y: number, sidePx: number): number {
  return (y < 0 ? y + sidePx : y) * sidePx + (x < 0 ? x + sidePx : x);
}

function isMaximum(surface: Float32Array, sidePx: number, x: number, y: number): boolean {
  const height = surface[index(x, y, sidePx)] ?? 0;
  const mask = sidePx - 1;
  for (let dy = -1; dy <= 1; dy += 1) {
    for (let dx = -1; dx <= 1; dx += 1) {
      if (dx === 0 && dy === 0) continue;
      if ((surface[((y + dy) & mask) * sidePx + ((x + dx) & mask)] ?? 0) >= height) return false;
    }
  }
  return true;
}

function insertPeak(peaks: SurfacePeak[], peak: SurfacePeak, count: number): void {
  let at = peaks.length;
  while (at > 0 && (peaks[at - 1]?.height ?? 0) < peak.height) at -= 1;
  peaks.splice(at, 0, peak);
  if (peaks.length > count) peaks.pop();
}
