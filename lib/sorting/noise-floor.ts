import type { PatchGrid } from "@/lib/analysis/types";
import { quantile } from "./robust";
import type { SortFrame } from "./types";

/** What noise alone leaves of Laplacian variance in a patch, squared levels of 255, at full and at half size. */
export interface NoiseFloor {
  readonly full: number;
  readonly half: number;
}

/** So few frames may show less than noise: a cap on the lens leaves black, where noise is cut off. Our own. */
const PLAINEST_SHARE = 0.05;

/**
 * The noise of a shoot: hardly any is without a plain patch somewhere, such as sky. One stack alone may be: the
 * plainest patch of a wood is foliage.
 * @returns infinite for no frames
 */
export function noiseFloorOf(frames: readonly SortFrame[]): NoiseFloor {
  return { full: floorAt(frames, "full"), half: floorAt(frames, "half") };
}

function floorAt(frames: readonly SortFrame[], size: "full" | "half"): number {
  const plainest = frames.map(({ measurements: { patches } }) =>
    patches[size].reduce((least, _, patch) => Math.min(least, levelOf(patches, size, patch)), Infinity),
  );
  return plainest.length === 0 ? Infinity : quantile(plainest, PLAINEST_SHARE);
}

/** Laplacian variance of a patch in squared levels: noise is about equal there all over a picture. */
export function levelOf(grid: PatchGrid, size: "full" | "half", patch: number): number {
  return (grid[size][patch] ?? 0) * (grid.brightness[patch] ?? 0) ** 2;
}
