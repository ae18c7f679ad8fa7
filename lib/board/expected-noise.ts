/**
 * Variance of a mean over that of a median, both of N normal values, N = 2 to 16 (for 1 it is 1).
 * Source: Cross Validated 468688, recalculated by numerical integration (check-values.md 2.3).
 */
const MEDIAN_EFFICIENCY = [
  1, 1, 0.743, 0.838, 0.697, 0.776, 0.679, 0.743, 0.669, 0.723, 0.663, 0.709, 0.659, 0.699, 0.656, 0.692,
];
/** What the efficiency tends to: 2 / pi. Source: Cross Validated 553097. */
const EFFICIENCY_OF_MANY = 2 / Math.PI;

/**
 * Noise that is left after merging, as a fraction of one frame's.
 * @param frames - how many are merged, 1 or more
 * @throws RangeError when that is not a whole number of 1 or more
 * Method and accuracy: 1 / sqrt(N) for the mean; for the median that over the root of its efficiency, to three digits
 * up to 16 frames and to 4 % beyond. Noise that is alike in all frames (hot pixels, dust) stays.
 * @example expectedNoise(4, "mean") // 0.5
 */
export function expectedNoise(frames: number, merge: "mean" | "median"): number {
  if (!Number.isInteger(frames) || frames < 1) throw new RangeError(`frames must be 1 or more, got ${frames}`);
  const mean = 1 / Math.sqrt(frames);
  return merge === "mean" ? mean : mean / Math.sqrt(MEDIAN_EFFICIENCY[frames - 1] ?? EFFICIENCY_OF_MANY);
}
