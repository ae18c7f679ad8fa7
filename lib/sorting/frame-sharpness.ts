import { isTextured } from "./judge-pair";
import type { PatchGrid } from "@/lib/analysis/types";
import { median } from "./robust";
import type { SortFrame } from "./types";

export type SoftVerdict = "sharp" | "ask" | "soft" | "cannot tell";

export interface FrameSharpness {
  /** Log ratio of the Laplacian variance to that of the stack, at the more telling of full and half size; 0 is usual. */
  readonly score: number;
  readonly verdict: SoftVerdict;
  /** Against the best of the stack, 0 to 1; null: cannot tell. */
  readonly relative: number | null;
}

/** Fewer frames have no middle that could be trusted. Source: analysis.md, step 7. */
const LEAST_FRAMES = 3;
/** The limit for asking, as a share of the limit for soft: -0.15 to -0.20. Source: analysis.md, step 7. */
const ASK_SHARE = 0.75;
/** Patches with less texture than this quantile are left out. Source: analysis.md, step 7. */
const TEXTURE_QUANTILE = 0.5;
/**
 * Plain patches hold nothing but noise, which is as sharp in a soft frame: only patches this many times above the
 * plainest of the stack count, unless too few of them are left. Our own, from generated shoots with sky.
 */
const ABOVE_NOISE = 2.5;
const LEAST_PATCH_SHARE = 0.1;
/** With fewer textured patches than this share, what jitter moves from patch to patch must be added up. Our own. */
const SPARSE_SHARE = 0.3;
/** Two frames this close in score vouch for each other. Our own. */
const AGREEING = 0.1;

/**
 * How sharp each frame of a stack is against the others, patch by patch, so that subject and light cancel out.
 * @param softLimit - log ratio under which a frame is soft; negative
 * @returns one entry per frame, in the same order
 * **Method**: for each of the more textured half of the patches the log ratio to the stack's median; the median over
 * the patches; the smaller of full and half size. The scores are then counted from the sharpest two frames that agree,
 * so that a stack of which half is soft is still seen.
 */
export function frameSharpness(frames: readonly SortFrame[], softLimit: number): FrameSharpness[] {
  const full = logRatios(frames, "full");
  const half = logRatios(frames, "half");
  const raw = frames.map((_, index) => Math.min(full[index] ?? 0, half[index] ?? 0));
  const canTell = frames.length >= LEAST_FRAMES && frames.filter(isTextured).length * 2 > frames.length;
  const base = Math.max(0, agreedBest(raw) - AGREEING / 2);
  const best = raw.length > 0 ? Math.max(...raw) : 0;
  return raw.map((value) => {
    const score = value - base;
    if (!canTell) return { score: value, verdict: "cannot tell", relative: null };
    const relative = Math.exp(Math.min(0, value - best));
    if (score < softLimit) return { score, verdict: "soft", relative };
    return { score, verdict: score < softLimit * ASK_SHARE ? "ask" : "sharp", relative };
  });
}

/** Highest score that a second frame comes near to; the median of fewer than three or of scores that never agree. */
function agreedBest(scores: readonly number[]): number {
  const sorted = [...scores].sort((a, b) => b - a);
  for (let index = 0; index + 1 < sorted.length; index++) {
    const here = sorted[index] ?? 0;
    const next = sorted[index + 1] ?? 0;
    if (here - next <= AGREEING) return (here + next) / 2;
  }
  return 0;
}

function logRatios(frames: readonly SortFrame[], size: "full" | "half"): number[] {
  const grids = frames.map((frame) => frame.measurements.patches);
  const count = Math.min(...grids.map((grid) => grid[size].length));
  if (!Number.isFinite(count) || count === 0) return frames.map(() => 0);
  const middles = Array.from({ length: count }, (_, patch) => median(grids.map((grid) => grid[size][patch] ?? 0)));
  const used = tellingPatches(middles, grids);
  if (used.length === 0) return frames.map(() => 0);
  const byPatch = grids.map((grid) =>
    median(
      used.map((patch) => {
        const value = grid[size][patch] ?? 0;
        const middle = middles[patch] ?? 1;
        // A patch that lost all its detail counts as far below, not as minus infinity.
        return Math.max(-6, Math.log(Math.max(value, 1e-12) / middle));
      }),
    ),
  );
  if (used.length >= SPARSE_SHARE * count) return byPatch;
  const sums = grids.map((grid) => used.reduce((sum, patch) => sum + (grid[size][patch] ?? 0), 0));
  const usual = median(sums);
  return byPatch.map((ratio, at) => {
    const bySum = Math.log(Math.max(sums[at] ?? 0, 1e-12) / usual);
    return Math.abs(bySum) < Math.abs(ratio) ? bySum : ratio;
  });
}

/** The more textured half of the patches, as far as they stand out from the noise. */
function tellingPatches(middles: readonly number[], grids: readonly PatchGrid[]): number[] {
  // Noise is about equal all over the picture in levels, not relative to the brightness.
  const levels = middles.map((middle, patch) => middle * median(grids.map((grid) => grid.brightness[patch] ?? 0)) ** 2);
  const ranked = levels.map((level, patch) => ({ level, patch })).filter(({ patch }) => (middles[patch] ?? 0) > 0);
  ranked.sort((a, b) => b.level - a.level);
  const half = ranked.slice(0, Math.ceil(ranked.length * (1 - TEXTURE_QUANTILE)));
  const noise = ranked.at(-1)?.level ?? 0;
  const clear = half.filter(({ level }) => level >= ABOVE_NOISE * noise).length;
  return half.slice(0, Math.max(clear, Math.ceil(ranked.length * LEAST_PATCH_SHARE))).map(({ patch }) => patch);
}

/** Centre of the patch that tells soft from sharp best: the most textured one, as fractions of width and height. */
export function tellingSpot(frame: SortFrame | undefined): { x: number; y: number } {
  if (!frame) return { x: 0.5, y: 0.5 };
  const { columns, rows, full, half, brightness } = frame.measurements.patches;
  let best = { score: -1, x: 0.5, y: 0.5 };
  for (let row = 1; row < rows - 1; row++) {
    for (let column = 1; column < columns - 1; column++) {
      const patch = row * columns + column;
      const score = Math.min(full[patch] ?? 0, half[patch] ?? 0) * (brightness[patch] ?? 0) ** 2;
      if (score > best.score) best = { score, x: (column + 0.5) / columns, y: (row + 0.5) / rows };
    }
  }
  return { x: best.x, y: best.y };
}
