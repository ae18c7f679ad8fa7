"use client";

import { Picture } from "@/components/board/picture";
import { useInHand } from "@/components/board/hand";
import type { BoardIndex } from "@/lib/board/board-index";
import { framesMoved } from "@/lib/board/moving";
import { nameOfMoved, outcomeOf } from "@/lib/board/outcome";
import { thumbnailUrl } from "@/lib/frames/picture-urls";

/** As many names as fit a glance. */
const NAMES_MOST = 4;

/** The paper beside the pointer while something is dragged: what it is, and what would happen here. */
export function CarriedPaper({ index }: { readonly index: BoardIndex }) {
  const carried = useInHand((state) => state.carried);
  if (!carried || carried.by === "taps") return null;
  const { moving, target } = carried;
  const frames = framesMoved(index, moving);
  const isBoundary = moving.kind === "frames" && moving.frameIds.length === 0;
  const hint = isBoundary ? "Drag the boundary to another frame." : "Over a tile it says what would happen.";
  const shown = (moving.kind === "stack" && index.tileOfStack.get(moving.stackId)?.reference) || frames[0];
  const rest = frames.length - NAMES_MOST;
  return (
    <div
      data-carried
      aria-hidden
      className="flex w-max max-w-80 items-start gap-2.5 border border-petrol bg-paper px-2.5 py-1.5 text-sm shadow-float"
    >
      {shown && !isBoundary && (
        <span className="mt-0.5 block h-11 w-16 shrink-0 overflow-hidden bg-well">
          <Picture src={thumbnailUrl(index.board.projectId, shown.id)} alt="" className="h-full w-full object-cover" />
        </span>
      )}
      <div className="min-w-0">
        {!isBoundary && <p className="figures font-bold">{nameOfMoved(index, moving)}</p>}
        {moving.kind === "frames" && frames.length > 2 && (
          <p className="figures text-[0.8125rem] leading-4.5 text-quiet">
            {frames
              .slice(0, NAMES_MOST)
              .map(({ name }) => name)
              .join(" ")}
            {rest > 0 && ` and ${rest} more`}
          </p>
        )}
        <p>{target ? outcomeOf(index, moving, target).sentence : hint}</p>
      </div>
    </div>
  );
}
