"use client";

import { GripVertical } from "lucide-react";
import { useRef, useState, type KeyboardEvent, type MouseEvent } from "react";
import {
  frameLabel,
  FrameName,
  FramePicture,
  FrameReason,
  placeClass,
  placeText,
  type BenchFrameProps,
} from "@/components/board/bench-frame";
import { FrameMenu } from "@/components/board/frame-menu";
import { gripOf } from "@/components/board/grip";
import { GRIP_HELP_ID } from "@/components/board/grip-help";
import { useHand, useInHand } from "@/components/board/hand";
import { classNames } from "@/components/ui/class-names";

interface FrameGridProps {
  readonly label: string;
  readonly frames: readonly BenchFrameProps[];
  readonly perRow: number;
  readonly hasPlaces: boolean;
}

/**
 * Frames to choose from: a click chooses one, with Shift as far as there, with Ctrl one more; the arrow keys go from
 * frame to frame, with Shift they choose on the way, Space chooses, Ctrl+A chooses all, Escape none.
 */
export function FrameGrid({ label, frames, perRow, hasPlaces }: FrameGridProps) {
  const hand = useHand();
  const grid = useRef<HTMLDivElement>(null);
  const [focusedId, setFocusedId] = useState<string | null>(null);
  const order = frames.map(({ frame }) => frame.id);
  const stopId = focusedId !== null && order.includes(focusedId) ? focusedId : order[0];

  const onKeyDown = (event: KeyboardEvent) => {
    if (!(event.target instanceof HTMLElement) || event.target.getAttribute("role") !== "row" || stopId === undefined)
      return;
    // The keys belong to what is carried.
    if (hand.get().carried) return;
    const at = order.indexOf(stopId);
    const to = order[stepOf(event.key, at, perRow, order.length)];
    const isCommand = event.ctrlKey || event.metaKey;
    if (to !== undefined) {
      setFocusedId(to);
      if (event.shiftKey) hand.extend(order, to, stopId);
      grid.current?.querySelector<HTMLElement>(`[data-row="${CSS.escape(to)}"]`)?.focus();
    } else if (event.key === " ") hand.toggle(stopId);
    else if (event.key.toLowerCase() === "a" && isCommand) hand.select(order);
    else if (event.key === "Enter") frames[at]?.onCompare?.();
    else if (event.key === "Escape" && hand.get().selected.size > 0) hand.select([]);
    else return;
    event.preventDefault();
    event.stopPropagation();
  };
  const onChoose = (event: MouseEvent, id: string) => {
    setFocusedId(id);
    if (event.shiftKey) hand.extend(order, id);
    else if (event.ctrlKey || event.metaKey || isTouch(event)) hand.toggle(id);
    else hand.selectOnly(id);
  };
  return (
    <div
      ref={grid}
      role="grid"
      aria-label={label}
      aria-multiselectable
      onKeyDown={onKeyDown}
      className="mt-3 flex flex-wrap gap-3"
    >
      {frames.map((props, at) => (
        <FrameRow
          key={props.frame.id}
          {...props}
          isFirst={at === 0}
          isStop={props.frame.id === stopId}
          hasPlaces={hasPlaces}
          onChoose={(event) => onChoose(event, props.frame.id)}
          onFocus={() => setFocusedId(props.frame.id)}
        />
      ))}
    </div>
  );
}

interface FrameRowProps extends BenchFrameProps {
  readonly isFirst: boolean;
  /** One frame of the grid is in the tab order; arrow keys reach the others. */
  readonly isStop: boolean;
  readonly hasPlaces: boolean;
  readonly onChoose: (event: MouseEvent) => void;
  readonly onFocus: () => void;
}

const HANDLE =
  "inline-flex size-7 shrink-0 cursor-grab items-center justify-center text-quiet hover:bg-ink hover:text-paper pointer-coarse:hidden";

function FrameRow({ isFirst, isStop, hasPlaces, onChoose, onFocus, ...props }: FrameRowProps) {
  const { frame, size, isReference, onCompare, projectId } = props;
  const hand = useHand();
  const isSelected = useInHand(({ selected }) => selected.has(frame.id));
  const isPickedUp = useInHand(({ carried }) => carried?.by === "taps" && carried.frameIds.has(frame.id));
  const tabIndex = isStop ? 0 : -1;
  return (
    <div
      role="row"
      data-row={frame.id}
      onFocus={onFocus}
      tabIndex={tabIndex}
      aria-selected={isSelected}
      aria-label={frameLabel(props)}
      style={{ width: size.widthPx }}
      className="scroll-mt-12 text-sm outline-offset-3 select-none"
    >
      <div
        role="gridcell"
        data-grip={hasPlaces ? gripOf.frame(frame.id) : undefined}
        onClick={onChoose}
        onDoubleClick={onCompare ?? undefined}
        className="cursor-pointer"
      >
        <span
          className={classNames(
            "relative block",
            (isSelected || isPickedUp) && "outline-3 outline-offset-1 outline-petrol",
          )}
          style={{ height: size.heightPx }}
        >
          <FramePicture {...props} />
          {isPickedUp && (
            <span className="absolute right-0 bottom-0 bg-petrol px-1.5 leading-5 font-bold text-petrol-on">
              picked up
            </span>
          )}
          {isSelected && !isPickedUp && (
            <span aria-hidden className="absolute right-0 bottom-0 bg-petrol px-1.5 leading-5 font-bold text-petrol-on">
              ✓
            </span>
          )}
        </span>
        <FrameName frame={frame} />
      </div>
      <div role="gridcell" className="flex items-center">
        <p className={classNames(placeClass(props), "min-w-0 flex-1 truncate")}>{placeText(props)}</p>
        {hasPlaces && (
          <button
            type="button"
            data-handle
            data-grip={gripOf.frame(frame.id)}
            tabIndex={tabIndex}
            aria-label={`Move ${frame.name}`}
            aria-describedby={GRIP_HELP_ID}
            onClick={() => hand.tap({ kind: "frames", frameIds: [frame.id] })}
            className={HANDLE}
          >
            <GripVertical aria-hidden size={16} />
          </button>
        )}
        <FrameMenu {...{ projectId, frame, isReference, onCompare, tabIndex }} isFirst={isFirst} />
      </div>
      {props.isWhy && (
        <div role="gridcell">
          <FrameReason {...props} />
        </div>
      )}
    </div>
  );
}

/** The frame that a key leads to; -1: the key leads nowhere. */
function stepOf(key: string, at: number, perRow: number, count: number): number {
  const step = { ArrowLeft: -1, ArrowRight: 1, ArrowUp: -perRow, ArrowDown: perRow }[key];
  if (key === "Home") return 0;
  if (key === "End") return count - 1;
  if (step === undefined || at + step < 0 || at + step >= count) return -1;
  return at + step;
}

/** A finger has no Ctrl key: each tap chooses one more. */
function isTouch({ nativeEvent }: MouseEvent): boolean {
  return nativeEvent instanceof PointerEvent && nativeEvent.pointerType === "touch";
}
