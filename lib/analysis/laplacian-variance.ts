import { addRun, makePatchSums } from "@/lib/analysis/laplacian-sums";
import { assertPlane } from "@/lib/analysis/plane";
import type { Plane } from "@/lib/analysis/types";

/**
 * Variance of the picture's Laplacian: a focus measure, larger where there is more fine detail.
 * @param plane - one channel, row-major, index `y * widthPx + x`, 0 to 255; at least 3 x 3 px
 * @returns population variance over inner pixels, in squared levels, 0 or more
 * @throws AnalysisError when smaller than 3 x 3 or `data.length` is not width x height
 * Method and accuracy: kernel [0 1 0; 1 -4 1; 0 1 0]; float64 sums, exact for whole numbers.
 * Edges: the one-pixel border is left out; a constant picture gives 0; any NaN gives NaN.
 * Compare only pictures of one size, exposure and demosaicing; noise of sigma s adds 20 s².
 * Source: Pech-Pacheco et al., ICPR 2000, vol. 3, 314-317, doi:10.1109/ICPR.2000.903548.
 * @example laplacianVariance(impulse5x5) // 20/9
 */
export function laplacianVariance(plane: Plane): number {
  assertPlane(plane, 3);
  const { data, widthPx, heightPx } = plane;
  const sums = makePatchSums(1);
  for (let y = 1; y < heightPx - 1; y += 1) {
    const run = { from: y * widthPx + 1, end: (y + 1) * widthPx - 1, above: -widthPx, below: widthPx };
    addRun(data, run, sums, 0);
  }
  const count = sums.count[0] ?? 0;
  const mean = (sums.response[0] ?? 0) / count;
  const variance = (sums.responseSquared[0] ?? 0) / count - mean * mean;
  // Rounding can leave a constant picture a hair under 0; NaN stays NaN.
  return variance < 0 ? 0 : variance;
}
