import { naturalBreak } from "./natural-breaks";

/** A pause between two frames that the pictures have decided. */
export interface DecidedPause {
  readonly seconds: number;
  readonly isSame: boolean;
}

export interface PauseLimit {
  /** Longest pause within a stack. */
  readonly seconds: number;
  /** Share of the decided pauses on the wrong side; 0.5 where nothing was decided by the pictures. */
  readonly errorShare: number;
}

/** Fewer decided pauses of a kind than this say nothing about where the limit lies. Our own. */
const LEAST_DECIDED = 3;
/** Log pauses in two classes must fit this well to be two classes: one class of normal spread gives about 0.64. */
const LEAST_FIT = 0.75;
/** Pauses within and between must differ by this factor at least to be told apart without pictures. Our own. */
const LEAST_FACTOR = 1.8;

/**
 * Finds the pause that separates "within a stack" from "between stacks": the cut of log pauses that errs least on
 * the pairs decided by the pictures; natural breaks of all log pauses where the pictures decide too few.
 * @returns null where neither says anything
 */
export function findPauseLimit(decided: readonly DecidedPause[], all: readonly number[]): PauseLimit | null {
  const same = decided.filter((pause) => pause.isSame).length;
  const different = decided.length - same;
  if (same >= LEAST_DECIDED && different >= LEAST_DECIDED) return leastErrorCut(decided);
  return breakOfLogs(all);
}

/** Errors of either kind weigh alike, however many more pauses there are within stacks than between. */
function leastErrorCut(decided: readonly DecidedPause[]): PauseLimit {
  const sorted = [...decided].sort((a, b) => a.seconds - b.seconds);
  const same = sorted.filter((pause) => pause.isSame).length;
  const different = sorted.length - same;
  let wrongSame = same;
  let wrongDifferent = 0;
  let best = { cost: Infinity, width: 0, seconds: 0, errorShare: 1 };
  for (let index = 0; index <= sorted.length; index++) {
    const low = sorted[index - 1]?.seconds ?? (sorted[0]?.seconds ?? 1) / 2;
    const high = sorted[index]?.seconds ?? (sorted.at(-1)?.seconds ?? 1) * 2;
    const cost = wrongSame / same + wrongDifferent / different;
    const width = Math.log(high / low);
    if (high > low && (cost < best.cost - 1e-9 || (cost < best.cost + 1e-9 && width > best.width))) {
      const errorShare = (wrongSame + wrongDifferent) / sorted.length;
      best = { cost, width, seconds: Math.sqrt(low * high), errorShare };
    }
    if (sorted[index]?.isSame) wrongSame--;
    else wrongDifferent++;
  }
  return { seconds: best.seconds, errorShare: best.errorShare };
}

function breakOfLogs(seconds: readonly number[]): PauseLimit | null {
  const found = naturalBreak(seconds.map(Math.log));
  if (!found || found.fit < LEAST_FIT || found.high - found.low < Math.log(LEAST_FACTOR)) return null;
  return { seconds: Math.exp((found.low + found.high) / 2), errorShare: 0.5 };
}
