"use client";

import { useVirtualizer } from "@tanstack/react-virtual";
import { useEffect, useMemo, useRef, useState, type KeyboardEvent } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { DropArea } from "@/components/board/drop-area";
import { BoundaryHandle } from "@/components/rail/boundary-handle";
import { RailRun } from "@/components/rail/rail-run";
import { LOOSE } from "@/components/board/use-board-place";
import type { BoardIndex } from "@/lib/board/board-index";
import { railRuns } from "@/lib/board/rail";
import { clockText } from "@/lib/board/words";

interface TimeRailProps {
  readonly index: BoardIndex;
  /** Frames of the docket's question. */
  readonly askedNow: ReadonlySet<string>;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
}

/** "Order taken": every frame as a line, the pauses between them, and brackets that name the tiles. */
export function TimeRail({ index, askedNow, chosen, onChoose }: TimeRailProps) {
  const { board } = index;
  const { canEdit } = useBoardCommands();
  const runs = useMemo(() => railRuns(board.frames, board.grid.longestPauseSeconds), [board]);
  const [scroller, setScroller] = useState<HTMLDivElement | null>(null);
  const nameOf = (stackId: string | null) => (stackId === null ? null : (index.tileOfStack.get(stackId)?.name ?? null));
  const virtualizer = useVirtualizer({
    count: runs.length,
    getScrollElement: () => scroller,
    estimateSize: (at) => runs[at]?.heightPx ?? 0,
    getItemKey: (at) => runs[at]?.key ?? at,
    overscan: 3,
  });
  useEffect(() => virtualizer.measure(), [virtualizer, runs]);

  const chosenAt = runs.findIndex((run) => (nameOf(run.stackId) ?? LOOSE) === chosen);
  const [focusedAt, setFocusedAt] = useState<number | null>(null);
  const items = virtualizer.getVirtualItems();
  const wantedStop = focusedAt ?? Math.max(0, chosenAt);
  // Something in view is always in the tab order, or the rail could not be reached by keyboard.
  const stopAt = items.some((item) => item.index === wantedStop) ? wantedStop : (items[0]?.index ?? 0);
  const scrollTo = useRef(virtualizer.scrollToIndex);
  useEffect(() => {
    scrollTo.current = virtualizer.scrollToIndex;
  });
  useEffect(() => {
    if (chosenAt >= 0 && scroller) scrollTo.current(chosenAt, { align: "auto" });
  }, [chosenAt, scroller]);

  const onKeyDown = (event: KeyboardEvent) => {
    const to = targetOf(event.key, stopAt, runs.length);
    if (to === null) return;
    event.preventDefault();
    setFocusedAt(to);
    virtualizer.scrollToIndex(to, { align: "auto" });
    requestAnimationFrame(() => scroller?.querySelector<HTMLElement>(`[data-run="${to}"]`)?.focus());
  };
  return (
    <section aria-label="Order taken" className="flex min-h-0 flex-col border-r border-ink">
      <div className="flex flex-wrap items-baseline justify-between gap-x-3 border-b border-hairline px-3 py-2">
        <h2 className="text-sm font-bold">Order taken</h2>
        <span className="figures text-sm text-quiet">{spanText(index)}</span>
      </div>
      <div
        ref={setScroller}
        role="group"
        aria-label="Brackets: arrow keys move from one to the next, Enter opens its tile"
        onKeyDown={onKeyDown}
        className="min-h-0 flex-1 overflow-y-auto pr-2 pl-3"
      >
        <DropArea id="rail" style={{ height: virtualizer.getTotalSize() + 16 }}>
          {items.map((item) => {
            const run = runs[item.index];
            const before = runs[item.index - 1];
            const name = run ? nameOf(run.stackId) : null;
            return run ? (
              <div
                key={item.key}
                className="group/rail absolute top-2 left-0 w-full"
                style={{ transform: `translateY(${item.start}px)` }}
              >
                <RailRun
                  run={run}
                  at={item.index}
                  name={name}
                  take={board.stacks.find((stack) => stack.id === run.stackId) ?? null}
                  askedFrames={index.askedFrames}
                  askedNow={askedNow}
                  isChosen={(name ?? LOOSE) === chosen}
                  isTabStop={item.index === stopAt}
                  canEdit={canEdit}
                  boundary={
                    before && run && canEdit && before.stackId !== run.stackId ? (
                      <BoundaryHandle
                        index={index}
                        before={before}
                        after={run}
                        isTabStop={item.index === stopAt || item.index - 1 === stopAt}
                      />
                    ) : null
                  }
                  onChoose={() => onChoose(name ?? LOOSE)}
                />
              </div>
            ) : null;
          })}
        </DropArea>
      </div>
    </section>
  );
}

function targetOf(key: string, at: number, count: number): number | null {
  if (key === "ArrowDown") return Math.min(count - 1, at + 1);
  if (key === "ArrowUp") return Math.max(0, at - 1);
  if (key === "Home") return 0;
  return key === "End" ? count - 1 : null;
}

function spanText({ board }: BoardIndex): string {
  const times = board.frames.flatMap((frame) => (frame.metadata.takenAt ? [frame.metadata.takenAt] : []));
  const [first] = times;
  const last = times.at(-1);
  if (!first || !last) return "no times";
  return `${clockText(first.local)?.slice(0, 5) ?? ""}–${clockText(last.local)?.slice(0, 5) ?? ""}`;
}
