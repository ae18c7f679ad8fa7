"use client";

import type { ReactNode } from "react";
import { gripOf } from "@/components/board/grip";
import { useInHand } from "@/components/board/hand";
import { LOOSE } from "@/components/board/use-board-place";
import { classNames } from "@/components/ui/class-names";
import type { BoardFrame, BoardStack } from "@/lib/board/model";
import { RAIL_LINE_PX, type RailRun as Run } from "@/lib/board/rail";
import { clockText, countOf } from "@/lib/board/words";

/** Where a line's bar starts and how long the sharpest is, px. */
const BAR_LEFT_PX = 71;
const BAR_PX = 80;
/** Bars tell sharpness from half of the best on: nearly all lie there, and differences shall show. */
const BAR_FROM = 0.5;

interface RailRunProps {
  readonly run: Run;
  readonly at: number;
  /** Of the tile; null: loose. */
  readonly name: string | null;
  readonly take: BoardStack | null;
  readonly askedFrames: ReadonlySet<string>;
  /** Those of the docket's question. */
  readonly askedNow: ReadonlySet<string>;
  readonly isChosen: boolean;
  readonly isTabStop: boolean;
  readonly canEdit: boolean;
  /** The handle on the boundary before it; null: it has none. */
  readonly boundary: ReactNode;
  readonly onChoose: () => void;
}

/** One run of frames on the rail with the pause before it; a bracket where they are a stack. */
export function RailRun({ run, at, name, take, isChosen, isTabStop, canEdit, ...rest }: RailRunProps) {
  const { boundary, onChoose, askedFrames, askedNow } = rest;
  const inUse = run.frames.filter((frame) => frame.setAside === null).length;
  const counts = `${inUse}/${run.frames.length}`;
  const label =
    name === null
      ? `${countOf(run.frames.length, "loose frame")}`
      : `${name}: ${inUse} of ${countOf(run.frames.length, "frame")} in use`;
  const isTall = run.runHeightPx >= 44;
  return (
    <>
      {run.pause && (
        <div
          style={{ height: run.pause.heightPx, marginLeft: BAR_LEFT_PX }}
          className="figures relative flex items-center border-l-2 border-dotted border-line pl-2 text-[0.8125rem] text-quiet"
        >
          {run.pause.text}
          {boundary}
        </div>
      )}
      <button
        type="button"
        data-run={at}
        data-drop={run.stackId === null ? LOOSE : `stack:${run.stackId}`}
        tabIndex={isTabStop ? 0 : -1}
        aria-label={label}
        aria-pressed={isChosen}
        onClick={onChoose}
        style={{ height: run.runHeightPx }}
        className="group relative flex w-full items-center text-left -outline-offset-1 hover:bg-tray"
      >
        <span className="block flex-1">
          {run.frames.map((frame) => (
            <FrameLine
              key={frame.id}
              frame={frame}
              asked={askedNow.has(frame.id) ? "now" : askedFrames.has(frame.id) ? "later" : null}
              canEdit={canEdit}
            />
          ))}
        </span>
        {name === null ? (
          <span className="w-14 shrink-0 text-center text-[0.8125rem] text-quiet">loose</span>
        ) : (
          <span
            className={classNames(
              "figures flex h-[calc(100%-4px)] w-14 shrink-0 items-center justify-center border-y border-r text-sm leading-4",
              isTall ? "flex-col" : "gap-1",
              isChosen ? "border-y-3 border-r-3 border-petrol" : "border-ink group-hover:bg-tray",
            )}
          >
            <span className="font-bold">{name}</span>
            <span className="text-[0.8125rem] text-quiet">{counts}</span>
            {isTall && take && take.take > 1 && <span className="text-[0.8125rem] text-quiet">take {take.take}</span>}
          </span>
        )}
      </button>
    </>
  );
}

interface FrameLineProps {
  readonly frame: BoardFrame;
  /** now: by the docket's question; later: by another that is open. */
  readonly asked: "now" | "later" | null;
  readonly canEdit: boolean;
}

/** Length: sharpness. Hollow: set aside. Dotted: cannot tell. Question mark: asked about, ochre by the docket's question. Petrol: held. */
function FrameLine({ frame, asked, canEdit }: FrameLineProps) {
  const isNow = asked === "now";
  const isHeld = useInHand(({ selected, carried }) => selected.has(frame.id) || !!carried?.frameIds.has(frame.id));
  const { relativeSharpness: sharpness } = frame;
  const share = sharpness === null ? 0.5 : Math.max(0.1, (sharpness - BAR_FROM) / (1 - BAR_FROM));
  return (
    <span
      data-line={frame.id}
      data-grip={canEdit ? gripOf.frame(frame.id) : undefined}
      className={classNames("flex items-center", isHeld && "bg-tray shadow-[inset_3px_0_var(--petrol)]")}
      style={{ height: RAIL_LINE_PX }}
    >
      <span
        className={classNames("figures shrink-0 text-[0.8125rem] leading-none", isNow ? "text-ochre" : "text-quiet")}
        style={{ width: BAR_LEFT_PX }}
      >
        {clockText(frame.metadata.takenAt?.local ?? null) ?? frame.name.slice(-8)}
      </span>
      <span
        style={{ width: share * BAR_PX }}
        className={classNames(
          "block h-1.5 shrink-0",
          sharpness === null && "h-0 border-t-2 border-dotted",
          sharpness !== null && frame.setAside !== null && "border",
          sharpness !== null && frame.setAside === null && (isNow ? "bg-ochre" : "bg-ink"),
          isNow ? "border-ochre" : "border-ink",
        )}
      />
      {asked !== null && (
        <span
          className={classNames("pl-1 text-[0.8125rem] leading-none", isNow ? "font-bold text-ochre" : "text-quiet")}
        >
          ?
        </span>
      )}
    </span>
  );
}
