"use client";

import {
  DndContext,
  DragOverlay,
  MouseSensor,
  TouchSensor,
  useDraggable,
  useSensor,
  useSensors,
  type Announcements,
  type Modifier,
} from "@dnd-kit/core";
import { useRef, type KeyboardEvent, type MouseEvent, type ReactNode, type TouchEvent } from "react";
import { CarriedPaper } from "@/components/board/carried-paper";
import { DropMark } from "@/components/board/drop-mark";
import { GRIP_HELP, GRIP_HELP_ID } from "@/components/board/grip-help";
import { useHand } from "@/components/board/hand";
import { TileKeyboardSensor } from "@/components/board/tile-keyboard-sensor";
import { useDragging } from "@/components/board/use-dragging";
import { useTapping } from "@/components/board/use-tapping";
import type { BoardIndex } from "@/lib/board/board-index";

interface DragLayerProps {
  readonly index: BoardIndex;
  readonly children: ReactNode;
}

/** The board says what happens itself, in names of tiles and frames, through one voice. */
const SILENT: Announcements = {
  onDragStart: () => undefined,
  onDragOver: () => undefined,
  onDragEnd: () => undefined,
  onDragCancel: () => undefined,
};

/** A hand that trembles while it clicks drags nothing; a finger scrolls unless it rests. */
const MOUSE = { activationConstraint: { distance: 5 } };
const TOUCH = { activationConstraint: { delay: 250, tolerance: 8 } };
/** Near the edge, as parts of the scrolling area. */
const AUTO_SCROLL = { threshold: { x: 0.06, y: 0.14 }, layoutShiftCompensation: false };

/**
 * Everything on the board that has a grip can be dragged: with the mouse, with a finger that rests on it, by keyboard
 * from tile to tile, or picked up and put down by two taps.
 */
export function DragLayer({ index, children }: DragLayerProps) {
  const dragging = useDragging(index);
  const sensors = useSensors(
    useSensor(MouseSensor, MOUSE),
    useSensor(TouchSensor, TOUCH),
    useSensor(TileKeyboardSensor, { step: dragging.step }),
  );
  return (
    <DndContext
      sensors={sensors}
      autoScroll={AUTO_SCROLL}
      collisionDetection={dragging.areaUnderPointer}
      accessibility={{ announcements: SILENT, screenReaderInstructions: { draggable: GRIP_HELP } }}
      onDragStart={dragging.start}
      onDragEnd={dragging.end}
      onDragCancel={dragging.cancel}
    >
      <p id={GRIP_HELP_ID} hidden>
        {GRIP_HELP}
      </p>
      <GripArea index={index} onGrip={dragging.grip}>
        {children}
      </GripArea>
      <DropMark index={index} />
      <DragOverlay dropAnimation={null} modifiers={BESIDE_POINTER} zIndex={60} style={OVERLAY}>
        <CarriedPaper index={index} />
      </DragOverlay>
    </DndContext>
  );
}

const OVERLAY = { width: "max-content", height: "auto", pointerEvents: "none" } as const;

interface GripAreaProps extends DragLayerProps {
  /** @returns whether there is something to be picked up */
  readonly onGrip: (grip: HTMLElement) => boolean;
}

/**
 * One draggable for the whole board, which takes the form of whatever grip is used: one for each of thousands of
 * tiles and frames would draw them all anew when a drag begins and ends.
 */
function GripArea({ index, onGrip, children }: GripAreaProps) {
  const { listeners, setNodeRef } = useDraggable({ id: "held" });
  const isHeld = useRef(false);
  const tapping = useTapping(index);
  const hand = useHand();
  const withGrip = (event: MouseEvent | TouchEvent | KeyboardEvent, name: string) => {
    const target = event.target instanceof Element ? event.target : null;
    const grip = target?.closest<HTMLElement>("[data-grip]");
    // Keys are for handles alone: Enter on a tile opens it.
    const isHandle = target === grip && grip?.dataset.handle !== undefined;
    if (!grip || (name === "onKeyDown" && !isHandle) || hand.get().carried) return;
    isHeld.current = onGrip(grip);
    if (!isHeld.current) return;
    setNodeRef(grip);
    listeners?.[name]?.(event);
  };
  return (
    <div
      className="contents"
      onMouseDown={(event) => event.button === 0 && withGrip(event, "onMouseDown")}
      onTouchStart={(event) => withGrip(event, "onTouchStart")}
      onKeyDown={(event) => withGrip(event, "onKeyDown")}
      onKeyDownCapture={tapping.onKeyDownCapture}
      onClickCapture={tapping.onClickCapture}
    >
      {children}
    </div>
  );
}

/** How far from the pointer the paper hangs, px. */
const HANGS_PX = 16;
const WINDOW_EDGE_PX = 8;

/** The paper goes along with the pointer, below or above the place that is aimed at: what that says stays in sight. */
const BESIDE_POINTER: Modifier[] = [
  ({ activatorEvent, draggingNodeRect, overlayNodeRect, windowRect, transform }) => {
    if (!draggingNodeRect || !windowRect) return transform;
    const { left, top } = draggingNodeRect;
    const start = startOf(activatorEvent) ?? { x: left - HANGS_PX, y: top - HANGS_PX };
    const paper = { width: overlayNodeRect?.width ?? 0, height: overlayNodeRect?.height ?? 0 };
    const x = Math.min(start.x + transform.x + HANGS_PX, windowRect.width - paper.width - WINDOW_EDGE_PX);
    const aimed = document.querySelector("[data-place][data-aimed]")?.getBoundingClientRect();
    const below = aimed ? aimed.bottom + WINDOW_EDGE_PX : start.y + transform.y + HANGS_PX;
    const isRoom = below + paper.height + WINDOW_EDGE_PX <= windowRect.height;
    const y = isRoom ? below : (aimed?.top ?? below) - paper.height - WINDOW_EDGE_PX;
    return { ...transform, x: x - left, y: y - top };
  },
];

/** Where a pointer took hold, px of the window; null: the keyboard did. */
function startOf(event: Event | null): { x: number; y: number } | null {
  if (event instanceof globalThis.MouseEvent) return { x: event.clientX, y: event.clientY };
  if (!event || !("touches" in event)) return null;
  const [touch] = (event as unknown as globalThis.TouchEvent).touches;
  return touch ? { x: touch.clientX, y: touch.clientY } : null;
}
