import type { SortFrame } from "./types";

/** A clock that goes back by more than this, or forward by more than the next, says nothing. Source: analysis.md, 1. */
const LEAST_KNOWN_S = -1;
const LONGEST_KNOWN_S = 1800;
/** Whole seconds: two frames of the same second are half a second apart on average. Source: analysis.md, 1. */
const LEAST_WHOLE_SECOND_S = 0.5;
/** No camera here is faster than this; keeps logarithms finite. */
const LEAST_FRACTION_S = 0.01;

/**
 * Seconds between two frames of one body that follow each other in the order taken.
 * @returns null where a time is missing or the difference is outside -1 to 1 800 s; else 0.01 or more
 */
export function pauseSeconds(before: SortFrame, after: SortFrame): number | null {
  const a = before.metadata.takenAt;
  const b = after.metadata.takenAt;
  if (!a || !b) return null;
  const bothOffsets = a.offsetMinutes !== null && b.offsetMinutes !== null;
  const zoneMs = bothOffsets ? ((b.offsetMinutes ?? 0) - (a.offsetMinutes ?? 0)) * 60_000 : 0;
  const seconds = (b.localMs - a.localMs - zoneMs) / 1000;
  if (!(seconds >= LEAST_KNOWN_S && seconds <= LONGEST_KNOWN_S)) return null;
  return Math.max(seconds, a.hasFraction && b.hasFraction ? LEAST_FRACTION_S : LEAST_WHOLE_SECOND_S);
}

/**
 * Groups frames by pauses alone: a pause longer than the limit begins a new stack.
 * @param timesS - seconds, ascending
 * @returns how many frames each stack has
 */
export function stackSizesByPause(timesS: readonly number[], limitS: number): number[] {
  const sizes: number[] = [];
  timesS.forEach((time, index) => {
    const before = timesS[index - 1];
    if (before === undefined || time - before > limitS) sizes.push(0);
    sizes.push((sizes.pop() ?? 0) + 1);
  });
  return sizes;
}
