import type { BoardFrame } from "@/lib/board/model";
import { pauseText } from "@/lib/board/words";

/** Height of one frame's line, px. */
export const RAIL_LINE_PX = 15;
/** A bracket is a target for the pointer: no smaller than WCAG 2.2, 2.5.8 asks. */
const LEAST_RUN_PX = 26;
const RUN_PADDING_PX = 3;
const SHORTEST_PAUSE_PX = 22;
const LONGEST_PAUSE_PX = 56;
/** Pauses are drawn by the logarithm of their length; from an hour on they are all the same height. */
const LONGEST_PAUSE_DRAWN_SECONDS = 3600;

/** Consecutive frames of one stack (or loose ones), and the pause before them. */
export interface RailRun {
  /** Frame ids may be in several runs of one stack, never the run's first frame. */
  readonly key: string;
  readonly stackId: string | null;
  readonly frames: readonly BoardFrame[];
  /** Null: nothing to draw, as before the first frame. */
  readonly pause: { readonly text: string; readonly heightPx: number } | null;
  /** Of frames and padding, without the pause. */
  readonly runHeightPx: number;
  readonly heightPx: number;
}

/**
 * The time rail: the frames in the order taken, cut where the stack changes.
 * A pause is drawn before every run but the first, and inside one where it is longer than the limit between stacks
 * (such a run is cut too: both halves carry the same bracket's name).
 * @param frames - in the order taken
 * @param longestPauseSeconds - the limit between stacks; null: pictures alone decided, nothing is cut inside a stack
 */
export function railRuns(frames: readonly BoardFrame[], longestPauseSeconds: number | null): RailRun[] {
  const runs: RailRun[] = [];
  let current: BoardFrame[] = [];
  const close = () => {
    const [head] = current;
    if (head) runs.push(makeRun(current, head, runs.length === 0));
  };
  for (const frame of frames) {
    const before = current.at(-1);
    const isLong =
      longestPauseSeconds !== null &&
      frame.pauseBeforeSeconds !== null &&
      frame.pauseBeforeSeconds > longestPauseSeconds;
    if (before && (before.stackId !== frame.stackId || isLong)) {
      close();
      current = [];
    }
    current.push(frame);
  }
  close();
  return runs;
}

function makeRun(frames: readonly BoardFrame[], head: BoardFrame, isFirst: boolean): RailRun {
  const runHeightPx = Math.max(LEAST_RUN_PX, frames.length * RAIL_LINE_PX + 2 * RUN_PADDING_PX);
  const pause = isFirst
    ? null
    : { text: pauseText(head.pauseBeforeSeconds), heightPx: pauseHeight(head.pauseBeforeSeconds) };
  return {
    key: head.id,
    stackId: head.stackId,
    frames,
    pause,
    runHeightPx,
    heightPx: runHeightPx + (pause?.heightPx ?? 0),
  };
}

function pauseHeight(seconds: number | null): number {
  if (seconds === null) return SHORTEST_PAUSE_PX;
  const share = Math.log1p(Math.min(seconds, LONGEST_PAUSE_DRAWN_SECONDS)) / Math.log1p(LONGEST_PAUSE_DRAWN_SECONDS);
  return Math.round(SHORTEST_PAUSE_PX + share * (LONGEST_PAUSE_PX - SHORTEST_PAUSE_PX));
}
