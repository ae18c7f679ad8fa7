/** Best split of sorted values into two classes. */
export interface TwoClassBreak {
  /** Largest value of the lower class. */
  readonly low: number;
  /** Smallest value of the upper class. */
  readonly high: number;
  /** Goodness of variance fit, 1 - SDCM / SDAM, 0 to 1. */
  readonly fit: number;
  /** Squared deviations from the two class means (SDCM). */
  readonly within: number;
  /** Squared deviations from the mean of all (SDAM). */
  readonly total: number;
}

/**
 * Splits values into two classes so that the squared deviations within the classes are least.
 * @param values - any order, finite
 * @returns null where there are fewer than two different values
 * **Method and accuracy**: all cuts of the sorted values by prefix sums about the mean; exact.
 * **Source**: Fisher, JASA 1958, 53, 789-798; Jenks 1967 (natural breaks).
 * @example naturalBreak([4, 5, 9, 10]) // low 5, high 9, fit 0.96154
 */
export function naturalBreak(values: readonly number[]): TwoClassBreak | null {
  const sorted = [...values].sort((a, b) => a - b);
  const mean = sorted.reduce((sum, value) => sum + value, 0) / sorted.length;
  const total = sorted.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  let best: TwoClassBreak | null = null;
  let sumLow = 0;
  for (let count = 1; count < sorted.length; count++) {
    const low = sorted[count - 1] ?? Number.NaN;
    const high = sorted[count] ?? Number.NaN;
    sumLow += low - mean;
    if (low === high) continue;
    // The deviations sum to 0, so the upper class's sum is minus the lower one's.
    const between = sumLow ** 2 / count + sumLow ** 2 / (sorted.length - count);
    const within = Math.max(0, total - between);
    if (!best || within < best.within) best = { low, high, fit: 1 - within / total, within, total };
  }
  return best;
}

/** What Otsu's method finds in a histogram. */
export interface OtsuSplit {
  /** Levels up to and including this one are the lower class. */
  readonly level: number;
  readonly between: number;
  readonly within: number;
  readonly total: number;
}

/**
 * Threshold of a histogram with the greatest variance between the classes.
 * @param counts - how often each level 0, 1, 2 ... occurs, 0 or more
 * @returns null where fewer than two levels occur
 * **Source**: Otsu, IEEE Trans. SMC 9(1), 1979, 62-66.
 * @example otsuSplit([8, 7, 2, 6, 9, 4]) // level 2
 */
export function otsuSplit(counts: readonly number[]): OtsuSplit | null {
  const all = counts.reduce((sum, count) => sum + count, 0);
  const mean = counts.reduce((sum, count, level) => sum + count * level, 0) / all;
  const total = counts.reduce((sum, count, level) => sum + count * (level - mean) ** 2, 0) / all;
  let best: OtsuSplit | null = null;
  let countLow = 0;
  let sumLow = 0;
  for (let level = 0; level < counts.length - 1; level++) {
    countLow += counts[level] ?? 0;
    sumLow += (counts[level] ?? 0) * level;
    if (countLow === 0 || countLow === all) continue;
    const meanLow = sumLow / countLow;
    const meanHigh = (mean * all - sumLow) / (all - countLow);
    const between = (countLow / all) * (1 - countLow / all) * (meanLow - meanHigh) ** 2;
    if (!best || between > best.between + 1e-12 * total) best = { level, between, within: total - between, total };
  }
  return best;
}
