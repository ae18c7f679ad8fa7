import type { StackDraft } from "./draft";
import { median } from "./robust";
import type { PatchGrid } from "@/lib/analysis/types";

/** Two neighbours' references and where the second lies in the first, full-size px. */
export interface SharedStrip {
  readonly a: number;
  readonly b: number;
  readonly xPx: number;
  readonly yPx: number;
}

export interface SoftStack {
  readonly index: number;
  /** Median log ratio of its sharpness to its neighbours' on the same ground; negative. */
  readonly score: number;
  /** How many neighbours see it so, of how many. */
  readonly witnesses: number;
  readonly neighbours: number;
}

/** Log ratio under which a neighbour counts as a witness, and the median that makes the stack soft. Our own. */
const WITNESS = -0.2;
const SOFT = -0.3;
const LEAST_WITNESS_SHARE = 0.75;
const LEAST_NEIGHBOURS = 2;
/** Fewer common patches say little. */
const LEAST_PATCHES = 6;
/** Patches this many times above the plainest of the frame hold more than noise. Our own, as for single frames. */
const ABOVE_NOISE = 2.5;

/**
 * Stacks of which all frames are soft: in the strip that two neighbours share both show the same, so that their
 * sharpness can be compared there, and a stack that loses against nearly all its neighbours was out of focus.
 * **Known to fail**: where half a grid is soft, only the stacks at the border are seen.
 */
export function findSoftStacks(stacks: readonly StackDraft[], strips: readonly SharedStrip[]): SoftStack[] {
  const ratios = new Map<number, number[]>();
  for (const strip of strips) {
    const [a, b] = [stacks[strip.a], stacks[strip.b]];
    const ratio = a && b ? compareStrip(a, b, strip) : null;
    if (ratio === null) continue;
    ratios.set(strip.a, [...(ratios.get(strip.a) ?? []), ratio]);
    ratios.set(strip.b, [...(ratios.get(strip.b) ?? []), -ratio]);
  }
  return [...ratios.entries()].flatMap(([index, found]) => {
    const score = median(found);
    const witnesses = found.filter((ratio) => ratio < WITNESS).length;
    const isSoft = found.length >= LEAST_NEIGHBOURS && score < SOFT && witnesses >= LEAST_WITNESS_SHARE * found.length;
    return isSoft ? [{ index, score, witnesses, neighbours: found.length }] : [];
  });
}

/** Log ratio of a's sharpness to b's over their common ground, at the more telling of full and half size. */
function compareStrip(a: StackDraft, b: StackDraft, { xPx, yPx }: SharedStrip): number | null {
  const [first, second] = [a.hub.measurements, b.hub.measurements];
  const pairs: [number, number][] = [];
  const { columns, rows } = first.patches;
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const x = ((column + 0.5) / columns) * first.widthPx - xPx;
      const y = ((row + 0.5) / rows) * first.heightPx - yPx;
      const [otherColumn, otherRow] = [
        Math.floor((x / second.widthPx) * second.patches.columns),
        Math.floor((y / second.heightPx) * second.patches.rows),
      ];
      const isInside =
        otherColumn >= 0 && otherRow >= 0 && otherColumn < second.patches.columns && otherRow < second.patches.rows;
      if (isInside) pairs.push([row * columns + column, otherRow * second.patches.columns + otherColumn]);
    }
  }
  const full = compareSize(first.patches, second.patches, pairs, "full");
  const half = compareSize(first.patches, second.patches, pairs, "half");
  if (full === null || half === null) return full ?? half;
  return Math.abs(full) > Math.abs(half) ? full : half;
}

function compareSize(
  a: PatchGrid,
  b: PatchGrid,
  pairs: readonly (readonly [number, number])[],
  size: "full" | "half",
): number | null {
  const [noiseA, noiseB] = [plainest(a, size), plainest(b, size)];
  const ratios = pairs.flatMap(([patchA, patchB]) => {
    const [valueA, valueB] = [a[size][patchA] ?? 0, b[size][patchB] ?? 0];
    const isClear = Math.max(levelOf(a, size, patchA) / noiseA, levelOf(b, size, patchB) / noiseB) >= ABOVE_NOISE;
    return isClear && valueA > 0 && valueB > 0 ? [Math.log(valueA / valueB)] : [];
  });
  return ratios.length >= LEAST_PATCHES ? median(ratios) : null;
}

function levelOf(grid: PatchGrid, size: "full" | "half", patch: number): number {
  return (grid[size][patch] ?? 0) * (grid.brightness[patch] ?? 0) ** 2;
}

function plainest(grid: PatchGrid, size: "full" | "half"): number {
  return grid[size].reduce((least, _, patch) => Math.min(least, levelOf(grid, size, patch)), Infinity) || 1e-9;
}
