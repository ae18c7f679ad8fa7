/**
 * Scale that turns the median absolute deviation into a standard deviation of normal values.
 * Source: 1 / Phi^-1(3/4), as in the documentation of common statistical packages.
 */
export const MAD_TO_SIGMA = 1.4826022185056018;

/** Modified z of a value: 0.6745 times its distance from the median in MADs (Iglewicz and Hoaglin 1993). */
const MODIFIED_Z_FACTOR = 0.6745;

/**
 * Middle value; of an even count the mean of the two middle ones.
 * @returns NaN for an empty list
 */
export function median(values: readonly number[]): number {
  return quantile(values, 0.5);
}

/**
 * Value below which a share of the values lies, by linear interpolation between order statistics.
 * @param share - 0 to 1
 * @returns NaN for an empty list
 */
export function quantile(values: readonly number[], share: number): number {
  if (values.length === 0) return Number.NaN;
  const sorted = [...values].sort((a, b) => a - b);
  const at = share * (sorted.length - 1);
  const low = sorted[Math.floor(at)] ?? Number.NaN;
  const high = sorted[Math.ceil(at)] ?? Number.NaN;
  return low + (high - low) * (at - Math.floor(at));
}

/** Median of the distances from the median; 0 when more than half the values are equal, NaN when empty. */
export function medianAbsoluteDeviation(values: readonly number[]): number {
  const middle = median(values);
  return median(values.map((value) => Math.abs(value - middle)));
}

/** Modified z-score of `value` among `values`; infinite where the MAD is 0 and the value differs. */
export function modifiedZ(value: number, values: readonly number[]): number {
  const distance = value - median(values);
  if (distance === 0) return 0;
  return (MODIFIED_Z_FACTOR * distance) / medianAbsoluteDeviation(values);
}

/** Most frequent value; of several, the first met in ascending order. Undefined for an empty list. */
export function mode(values: readonly number[]): number | undefined {
  const counts = new Map<number, number>();
  for (const value of values) counts.set(value, (counts.get(value) ?? 0) + 1);
  let best: number | undefined;
  for (const value of [...counts.keys()].sort((a, b) => a - b)) {
    if (best === undefined || (counts.get(value) ?? 0) > (counts.get(best) ?? 0)) best = value;
  }
  return best;
}
