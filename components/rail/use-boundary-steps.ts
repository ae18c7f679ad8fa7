"use client";

import { usePutDown } from "@/components/board/use-put-down";
import type { BoardIndex } from "@/lib/board/board-index";
import { framesMoved, nameOfTarget } from "@/lib/board/moving";
import type { RailRun } from "@/lib/board/rail";
import { moveBoundary } from "@/lib/board/rail-boundary";

interface BoundaryStep {
  /** "One frame earlier: HARB0019 to A4". */
  readonly label: string;
  readonly move: () => void;
}

/** The boundary between two runs one frame earlier and one later, each with what it would do. */
export function useBoundarySteps(index: BoardIndex, before: RailRun, after: RailRun): BoundaryStep[] {
  const putDown = usePutDown(index);
  return [
    { steps: -1, word: "earlier" },
    { steps: 1, word: "later" },
  ].flatMap(({ steps, word }) => {
    const step = moveBoundary(before, after, steps);
    if (!step) return [];
    const names = framesMoved(index, step.moving).map(({ name }) => name);
    const label = `One frame ${word}: ${names.join(" ")} to ${nameOfTarget(index, step.target)}`;
    return [{ label, move: () => void putDown(step.moving, step.target) }];
  });
}
