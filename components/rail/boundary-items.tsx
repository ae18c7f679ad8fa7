"use client";

import { MenuItem } from "@/components/ui/menu";
import { useBoundarySteps } from "@/components/rail/use-boundary-steps";
import type { BoardIndex } from "@/lib/board/board-index";
import { railRuns, type RailRun } from "@/lib/board/rail";

interface BoundaryItemsProps {
  readonly index: BoardIndex;
  readonly stackId: string;
}

/** The boundaries of a stack in the order taken, as items of its menu: its first and last frame, and its neighbours'. */
export function BoundaryItems({ index, stackId }: BoundaryItemsProps) {
  const runs = railRuns(index.board.frames, index.board.grid.longestPauseSeconds);
  const first = runs.findIndex((run) => run.stackId === stackId);
  const last = runs.findLastIndex((run) => run.stackId === stackId);
  return (
    <>
      <Boundary index={index} name="start" before={runs[first - 1]} after={runs[first]} />
      <Boundary index={index} name="end" before={runs[last]} after={runs[last + 1]} />
    </>
  );
}

interface BoundaryProps {
  readonly index: BoardIndex;
  readonly name: "start" | "end";
  readonly before: RailRun | undefined;
  readonly after: RailRun | undefined;
}

function Boundary({ before, after, ...rest }: BoundaryProps) {
  return before && after ? <Steps before={before} after={after} {...rest} /> : null;
}

interface StepsProps extends BoundaryProps {
  readonly before: RailRun;
  readonly after: RailRun;
}

function Steps({ index, name, before, after }: StepsProps) {
  const steps = useBoundarySteps(index, before, after);
  return steps.map(({ label, move }) => (
    <MenuItem key={label} onSelect={move}>
      Its {name} {label.charAt(0).toLowerCase() + label.slice(1)}
    </MenuItem>
  ));
}
