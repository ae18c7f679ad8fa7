import type { Moving, Target } from "@/lib/board/moving";
import type { RailRun } from "@/lib/board/rail";

export interface BoundaryMove {
  readonly moving: Extract<Moving, { kind: "frames" }>;
  readonly target: Target;
}

/**
 * The boundary between two runs of the rail, moved by whole frames.
 * @param steps - later in time is positive: frames of the second run come to the first; negative: the other way
 * @returns what moves where; null where both are the same stack, or nothing moves
 */
export function moveBoundary(before: RailRun, after: RailRun, steps: number): BoundaryMove | null {
  if (before.stackId === after.stackId || steps === 0) return null;
  const frames = steps > 0 ? after.frames.slice(0, steps) : before.frames.slice(steps);
  const stackId = steps > 0 ? before.stackId : after.stackId;
  if (frames.length === 0) return null;
  return {
    moving: { kind: "frames", frameIds: frames.map(({ id }) => id) },
    target: stackId === null ? { kind: "loose" } : { kind: "stack", stackId },
  };
}

/**
 * How far the boundary goes when it is dragged onto a frame's line.
 * @param isLowerHalf - the pointer is in the lower half of that line: the boundary comes after it
 * @returns steps for `moveBoundary`; null where the frame is in neither run
 */
export function stepsTo(before: RailRun, after: RailRun, frameId: string, isLowerHalf: boolean): number | null {
  const inBefore = before.frames.findIndex(({ id }) => id === frameId);
  if (inBefore >= 0) return inBefore + Number(isLowerHalf) - before.frames.length;
  const inAfter = after.frames.findIndex(({ id }) => id === frameId);
  return inAfter < 0 ? null : inAfter + Number(isLowerHalf);
}
