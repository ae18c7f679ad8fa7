"use client";

import { BenchFrame, type BenchFrameProps } from "@/components/board/bench-frame";
import { useBoardCommands } from "@/components/board/board-commands";
import { FrameGrid } from "@/components/board/frame-grid";

interface BenchFramesProps {
  /** "Frames of A3". */
  readonly label: string;
  readonly frames: readonly BenchFrameProps[];
  readonly perRow: number;
  /** There are places in sight to drag to. */
  readonly hasPlaces: boolean;
}

/** The frames of a bench: to be looked at, or to be chosen from and moved where the person may. */
export function BenchFrames({ label, frames, perRow, hasPlaces }: BenchFramesProps) {
  const { canEdit } = useBoardCommands();
  if (canEdit) return <FrameGrid {...{ label, frames, perRow, hasPlaces }} />;
  return (
    <ul className="mt-3 flex flex-wrap gap-3">
      {frames.map((props) => (
        <BenchFrame key={props.frame.id} {...props} />
      ))}
    </ul>
  );
}
