"use client";

import { MoveVertical } from "lucide-react";
import { gripOf } from "@/components/board/grip";
import { Button } from "@/components/ui/button";
import { Popover } from "@/components/ui/popover";
import { useBoundarySteps } from "@/components/rail/use-boundary-steps";
import type { BoardIndex } from "@/lib/board/board-index";
import { nameOfStack } from "@/lib/board/moving";
import type { RailRun } from "@/lib/board/rail";

interface BoundaryHandleProps {
  readonly index: BoardIndex;
  readonly before: RailRun;
  readonly after: RailRun;
  readonly isTabStop: boolean;
}

/** The end of a bracket: dragged along the rail it moves frames to the neighbour; pressed, it does so one by one. */
export function BoundaryHandle({ index, before, after, isTabStop }: BoundaryHandleProps) {
  const steps = useBoundarySteps(index, before, after);
  const nameOf = ({ stackId }: RailRun) => (stackId === null ? "the loose frames" : nameOfStack(index, stackId));
  const label = `Boundary between ${nameOf(before)} and ${nameOf(after)}`;
  return (
    <Popover
      label={label}
      trigger={{
        "aria-label": label,
        tabIndex: isTabStop ? 0 : -1,
        ...{ "data-grip": gripOf.boundary(before.key) },
        className:
          "absolute top-1/2 right-0 inline-flex h-6 w-14 -translate-y-1/2 cursor-ns-resize items-center justify-center bg-paper text-ink opacity-0 group-hover/rail:opacity-60 hover:opacity-100 focus-visible:opacity-100 data-[state=open]:opacity-100 pointer-coarse:opacity-100",
        children: <MoveVertical aria-hidden size={16} />,
      }}
    >
      <p className="mb-2 text-sm font-semibold">{label}</p>
      <div className="flex flex-col gap-2">
        {steps.map(({ label: step, move }) => (
          <Button key={step} size="slim" onClick={move}>
            {step}
          </Button>
        ))}
      </div>
    </Popover>
  );
}
