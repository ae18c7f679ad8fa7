import { median } from "@/lib/board/board-index";
import type { BoardFrame } from "@/lib/board/model";
import { SOFT_LIMIT } from "@/lib/sorting/types";

/** A bar that can still be seen, share of the comb's height. */
const STUB = 0.12;

export interface CombBar {
  readonly frameId: string;
  /** Share of the comb's height, STUB to 1; null: the sharpness is not known. */
  readonly height: number | null;
  /** Drawn hollow. */
  readonly isSetAside: boolean;
  /** Put here and not measured yet: drawn hatched. */
  readonly isMeasuring: boolean;
}

/**
 * One bar per frame: from the soft limit of the tile (nothing) up to its best frame (full), so that differences show.
 * @param frames - of one stack, in the order taken; relativeSharpness 0 to 1 against the best
 */
export function combBars(frames: readonly BoardFrame[]): CombBar[] {
  const known = frames.flatMap(({ relativeSharpness, setAside }) =>
    relativeSharpness !== null && setAside === null ? [relativeSharpness] : [],
  );
  const best = Math.max(0, ...known);
  const limit = softLimit(frames);
  return frames.map((frame) => {
    const { id, relativeSharpness, setAside } = frame;
    return {
      frameId: id,
      isSetAside: setAside !== null,
      isMeasuring: isMeasuring(frame, frames),
      height: relativeSharpness === null ? null : barHeight(relativeSharpness, limit, best),
    };
  });
}

/**
 * Whether a frame that a person put into this stack waits to be measured in it: nothing is known of it, although of
 * others there it is. Where nobody's sharpness can be told, nothing is waited for.
 * @param frames - of the stack
 */
export function isMeasuring(frame: BoardFrame, frames: readonly BoardFrame[]): boolean {
  const isUnknown = frame.stackId !== null && frame.relativeSharpness === null && frame.shift === null;
  return isUnknown && frame.placedBy === "person" && frames.some(({ relativeSharpness }) => relativeSharpness !== null);
}

/** Relative sharpness under which a frame of this stack is soft: the median in use, less the project's limit. */
export function softLimit(frames: readonly BoardFrame[]): number {
  const known = frames.flatMap(({ relativeSharpness, setAside }) =>
    relativeSharpness !== null && setAside === null ? [relativeSharpness] : [],
  );
  return (median(known) ?? 0) * Math.exp(SOFT_LIMIT);
}

function barHeight(value: number, limit: number, best: number): number {
  if (best <= limit) return value > 0 ? 1 : STUB;
  return Math.min(1, Math.max(STUB, (value - limit) / (best - limit)));
}
