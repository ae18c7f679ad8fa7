/**
 * Agreement of two groupings of the same things, corrected for chance.
 * @param a - the group of each thing, in any naming
 * @param b - the same for the other grouping, as long
 * @returns 1 for the same grouping, about 0 for chance; 1 for fewer than two things
 * Source: Hubert and Arabie, J. of Classification 2, 1985, 193-218.
 */
export function adjustedRandIndex(a: readonly unknown[], b: readonly unknown[]): number {
  const { both, first, second, all } = countPairs(a, b);
  const expected = all === 0 ? 0 : (first * second) / all;
  const most = (first + second) / 2;
  return most === expected ? 1 : (both - expected) / (most - expected);
}

/** F1 of "these two belong together" over all pairs; 1 where neither grouping joins any. */
export function pairwiseF1(truth: readonly unknown[], found: readonly unknown[]): number {
  const { both, first, second } = countPairs(truth, found);
  return first + second === 0 ? 1 : (2 * both) / (first + second);
}

function countPairs(a: readonly unknown[], b: readonly unknown[]) {
  if (a.length !== b.length) throw new RangeError(`groupings must be as long as each other: ${a.length}, ${b.length}`);
  const joint = new Map<unknown, Map<unknown, number>>();
  a.forEach((group, at) => {
    const row = joint.get(group) ?? new Map<unknown, number>();
    row.set(b[at], (row.get(b[at]) ?? 0) + 1);
    joint.set(group, row);
  });
  const pairs = (counts: Iterable<number>) => [...counts].reduce((sum, n) => sum + (n * (n - 1)) / 2, 0);
  const sizes = (groups: readonly unknown[]) => {
    const counts = new Map<unknown, number>();
    for (const group of groups) counts.set(group, (counts.get(group) ?? 0) + 1);
    return counts.values();
  };
  return {
    both: [...joint.values()].reduce((sum, row) => sum + pairs(row.values()), 0),
    first: pairs(sizes(a)),
    second: pairs(sizes(b)),
    all: (a.length * (a.length - 1)) / 2,
  };
}
