import { isTextured } from "./judge-pair";
import type { PatchGrid } from "@/lib/analysis/types";
import type { NoiseFloor } from "./noise-floor";
import { median } from "./robust";
import type { SortFrame } from "./types";

type Size = "full" | "half";

export type SoftVerdict = "sharp" | "ask" | "soft" | "cannot tell";

export interface FrameSharpness {
  /** Log ratio of the Laplacian variance to that of the stack, at the more telling of full and half size; 0 is usual. */
  readonly score: number;
  /** The same whatever it comes from, so also from jitter: more detail is easier to register. */
  readonly detail: number;
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
/** So few patches above the noise cannot tell blur from movement. Our own. */
const LEAST_PATCHES = 4;
/** So far from the stack in either direction blur may have taken all that both sizes show; nothing else does. Our own. */
const HEAVY_RATIO = 1;
/**
 * Log ratio at full size for each that it differs from half size. Blur of 0.5 to 1 px makes 2.2 to 3.5 on generated
 * shoots of all scenes, jitter and movement 10 and more. Our own.
 */
const RATIO_PER_TILT = 4;
/** Less than this share of a patch's detail cannot be told from the noise. Our own. */
const LEAST_LEFT = 0.02;
/** Two frames this close in score vouch for each other. Our own. */
const AGREEING = 0.1;

/**
 * How sharp each frame of a stack is against the others, patch by patch, so that subject and light cancel out.
 * @param softLimit - log ratio under which a frame is soft; negative
 * @param noise - of the whole shoot
 * @returns one entry per frame, in the same order
 * **Method**: for each of the more textured half of the patches the log ratio to the stack's median; the median over
 * the patches; the smaller of full and half size, as far as blur explains it. The scores are then counted from the
 * sharpest two frames that agree, so that a stack of which half is soft is still seen.
 */
export function frameSharpness(frames: readonly SortFrame[], softLimit: number, noise: NoiseFloor): FrameSharpness[] {
  const full = logRatios(frames, "full");
  const half = logRatios(frames, "half");
  const limits = blurLimits(frames, noise);
  const details = frames.map((_, at) => Math.min(full[at] ?? 0, half[at] ?? 0));
  const raw = details.map((detail, at) => {
    const { least, most } = limits[at] ?? ANYTHING;
    return Math.max(least, Math.min(most, detail));
  });
  const canTell = frames.length >= LEAST_FRAMES && frames.filter(isTextured).length * 2 > frames.length;
  const base = Math.max(0, agreedBest(raw) - AGREEING / 2);
  const best = raw.length > 0 ? Math.max(...raw) : 0;
  return raw.map((value, at) => {
    const score = value - base;
    const detail = details[at] ?? 0;
    if (!canTell) return { score: value, detail, verdict: "cannot tell", relative: null };
    const relative = Math.exp(Math.min(0, value - best));
    if (score < softLimit) return { score, detail, verdict: "soft", relative };
    return { score, detail, verdict: score < softLimit * ASK_SHARE ? "ask" : "sharp", relative };
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

/** Log ratio of each frame to the stack at one size. */
function logRatios(frames: readonly SortFrame[], size: Size): number[] {
  const grids = frames.map((frame) => frame.measurements.patches);
  const middles = middlesOf(grids, size);
  const used = tellingPatches(middles, grids, { floor: Infinity, least: LEAST_PATCH_SHARE });
  if (used.length === 0) return frames.map(() => 0);
  const byPatch = grids.map((grid) =>
    median(used.map((patch) => logRatio(grid[size][patch] ?? 0, middles[patch] ?? 0))),
  );
  if (used.length >= SPARSE_SHARE * middles.length) return byPatch;
  const sums = grids.map((grid) => used.reduce((sum, patch) => sum + (grid[size][patch] ?? 0), 0));
  const usual = median(sums);
  return byPatch.map((ratio, at) => {
    const bySum = logRatio(sums[at] ?? 0, usual);
    return Math.abs(bySum) < Math.abs(ratio) ? bySum : ratio;
  });
}

interface Limits {
  readonly least: number;
  readonly most: number;
}

const ANYTHING: Limits = { least: -Infinity, most: Infinity };

/**
 * Between which log ratios blur can have put each frame against the stack.
 * Blur takes more from the finest detail than from what is left at half size. What jitter or movement carries out of a
 * patch is lost at both sizes alike, and edges that only fall otherwise between the pixels are lost at half size alone.
 */
function blurLimits(frames: readonly SortFrame[], noise: NoiseFloor): Limits[] {
  const grids = frames.map((frame) => frame.measurements.patches);
  const middles = { full: middlesOf(grids, "full"), half: middlesOf(grids, "half") };
  const used = tellingPatches(middles.full, grids, { floor: noise.full, least: 0 });
  if (used.length < LEAST_PATCHES) return frames.map(() => ANYTHING);
  return grids.map((grid) => {
    const ratioAt = (size: Size, patch: number) => {
      const share = noise[size] / Math.max(1, grid.brightness[patch] ?? 0) ** 2;
      const usual = Math.max(1e-12, (middles[size][patch] ?? 0) - share);
      return logRatio(Math.max((grid[size][patch] ?? 0) - share, LEAST_LEFT * usual), usual);
    };
    if (Math.abs(median(used.map((patch) => ratioAt("full", patch)))) > HEAVY_RATIO) return ANYTHING;
    const tilt = median(used.map((patch) => ratioAt("full", patch) - ratioAt("half", patch)));
    return { least: Math.min(0, RATIO_PER_TILT * tilt), most: Math.max(0, RATIO_PER_TILT * tilt) };
  });
}

function middlesOf(grids: readonly PatchGrid[], size: Size): number[] {
  const count = Math.min(...grids.map((grid) => grid[size].length));
  if (!Number.isFinite(count)) return [];
  return Array.from({ length: count }, (_, patch) => median(grids.map((grid) => grid[size][patch] ?? 0)));
}

/** A patch that lost all its detail counts as far below, not as minus infinity. */
function logRatio(value: number, usual: number): number {
  return Math.max(-6, Math.log(Math.max(value, 1e-12) / usual));
}

/** The more textured half of the patches, as far as they stand out from the noise, the most textured first. */
function tellingPatches(
  middles: readonly number[],
  grids: readonly PatchGrid[],
  { floor, least }: { readonly floor: number; readonly least: number },
): number[] {
  // Noise is about equal all over the picture in levels, not relative to the brightness.
  const levels = middles.map((middle, patch) => middle * median(grids.map((grid) => grid.brightness[patch] ?? 0)) ** 2);
  const ranked = levels.map((level, patch) => ({ level, patch })).filter(({ patch }) => (middles[patch] ?? 0) > 0);
  ranked.sort((a, b) => b.level - a.level);
  const half = ranked.slice(0, Math.ceil(ranked.length * (1 - TEXTURE_QUANTILE)));
  const plainest = Math.min(floor, ranked.at(-1)?.level ?? 0);
  const clear = half.filter(({ level }) => level >= ABOVE_NOISE * plainest).length;
  return half.slice(0, Math.max(clear, Math.ceil(ranked.length * least))).map(({ patch }) => patch);
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
