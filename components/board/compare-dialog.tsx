"use client";

import { ArrowDown, ArrowLeft, ArrowRight, ArrowUp } from "lucide-react";
import { useState, type KeyboardEvent } from "react";
import { Crop } from "@/components/board/crop";
import { SpotMap } from "@/components/board/spot-map";
import { useElementSize } from "@/components/board/use-element-size";
import { useScreenDensity } from "@/components/board/use-screen-density";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import type { BoardIndex } from "@/lib/board/board-index";
import { spotInFrame, spotInView } from "@/lib/board/layout";
import type { BoardFrame, BoardStack } from "@/lib/board/model";
import { distanceText, percent } from "@/lib/board/words";
import { CROP_MOST_PX } from "@/lib/frames/schema";

interface CompareDialogProps {
  readonly index: BoardIndex;
  readonly name: string;
  readonly stack: BoardStack;
  readonly frames: readonly BoardFrame[];
  readonly reference: BoardFrame;
  readonly frameId: string;
  /** Another frame, or null to close. */
  readonly onChange: (frameId: string | null) => void;
}

/** How far an arrow moves the spot, px of the frame: a third of what is seen. */
const STEP_PX = 160;
const TALLEST_PX = 560;

/** A frame and its reference side by side at 100 %, at the same spot; arrows or the small picture move the spot of both. */
export function CompareDialog({ index, name, stack, frames, reference, frameId, onChange }: CompareDialogProps) {
  const [wished, setWished] = useState({ x: stack.spot.x * reference.widthPx, y: stack.spot.y * reference.heightPx });
  const [paneRef, paneSize] = useElementSize();
  const density = useScreenDensity();
  const others = frames.filter((frame) => frame.id !== reference.id);
  const at = Math.max(
    0,
    others.findIndex((frame) => frame.id === frameId),
  );
  const frame = others[at];
  if (!frame) return null;

  const widthPx = Math.min(Math.floor(CROP_MOST_PX / density), paneSize?.width ?? 0);
  const size = { widthPx, heightPx: Math.min(TALLEST_PX, Math.round(widthPx * 0.8)) };
  const seen = { widthPx: size.widthPx * density, heightPx: size.heightPx * density };
  const spot = spotInView(wished, seen, [reference, frame]);
  const moveTo = (x: number, y: number) => setWished(spotInView({ x, y }, seen, [reference, frame]));
  const move = (dx: number, dy: number) => moveTo(spot.x + dx * STEP_PX, spot.y + dy * STEP_PX);
  const onKeyDown = (event: KeyboardEvent) => {
    const step = ARROWS[event.key];
    if (!step) return;
    event.preventDefault();
    move(step[0], step[1]);
  };
  return (
    <Dialog
      isOpen
      size="wide"
      onOpenChange={(isOpen) => !isOpen && onChange(null)}
      title={`${name}: ${frame.name} beside the reference`}
      description={
        <p className="text-sm text-quiet">
          The same spot of both at 100 %: one pixel of the picture is one pixel of the screen.{" "}
          <span className="pointer-coarse:hidden">Click the small picture or use the arrow keys to move the spot.</span>
          <span className="hidden pointer-coarse:inline">Tap the small picture or the arrows to move the spot.</span>
        </p>
      }
    >
      <div
        role="group"
        tabIndex={0}
        aria-label="Pictures at 100 %: arrow keys move the spot of both"
        onKeyDown={onKeyDown}
        className="grid gap-4 md:grid-cols-2"
      >
        <Pane
          projectId={index.board.projectId}
          frame={frame}
          spot={spot}
          size={size}
          paneRef={paneRef}
          note={frameNote(frame)}
        />
        <Pane projectId={index.board.projectId} frame={reference} spot={spot} size={size} note="reference" />
      </div>
      <div className="mt-4 flex flex-wrap items-end gap-x-8 gap-y-3">
        <SpotMap projectId={index.board.projectId} reference={reference} spot={spot} size={seen} onMove={moveTo} />
        <div role="group" aria-label="Move the spot" className="flex gap-1">
          <Button size="slim" aria-label="Spot left" onClick={() => move(-1, 0)}>
            <ArrowLeft aria-hidden size={16} />
          </Button>
          <Button size="slim" aria-label="Spot up" onClick={() => move(0, -1)}>
            <ArrowUp aria-hidden size={16} />
          </Button>
          <Button size="slim" aria-label="Spot down" onClick={() => move(0, 1)}>
            <ArrowDown aria-hidden size={16} />
          </Button>
          <Button size="slim" aria-label="Spot right" onClick={() => move(1, 0)}>
            <ArrowRight aria-hidden size={16} />
          </Button>
        </div>
        <div role="group" aria-label="Frame to compare" className="flex items-center gap-2">
          <Button size="slim" disabled={at === 0} onClick={() => onChange(others[at - 1]?.id ?? null)}>
            Frame before
          </Button>
          <span className="figures text-sm">
            {at + 1} of {others.length}
          </span>
          <Button size="slim" disabled={at === others.length - 1} onClick={() => onChange(others[at + 1]?.id ?? null)}>
            Frame after
          </Button>
        </div>
        <Button size="slim" className="ml-auto" onClick={() => onChange(null)}>
          Close
        </Button>
      </div>
    </Dialog>
  );
}

interface PaneProps {
  readonly projectId: string;
  readonly frame: BoardFrame;
  readonly spot: { readonly x: number; readonly y: number };
  readonly size: { readonly widthPx: number; readonly heightPx: number };
  readonly note: string;
  readonly paneRef?: (element: HTMLElement | null) => void;
}

function Pane({ projectId, frame, spot, size, note, paneRef }: PaneProps) {
  const centre = spotInFrame(frame, spot);
  return (
    <figure className="min-w-0">
      <div
        ref={paneRef}
        className="flex items-center justify-center overflow-hidden bg-well"
        style={{ height: size.heightPx }}
      >
        {size.widthPx > 0 && (
          <Crop projectId={projectId} frame={frame} centre={centre} size={size} alt={`${frame.name} at 100 %`} />
        )}
      </div>
      <figcaption className="mt-1 flex flex-wrap gap-x-4 text-sm">
        <span className="figures font-bold">{frame.name}</span>
        <span className="figures text-quiet">{note}</span>
        {!centre.isSameSpot && (
          <span className="font-semibold text-ochre">does not show this spot: its middle is shown</span>
        )}
      </figcaption>
    </figure>
  );
}

function frameNote(frame: BoardFrame): string {
  return [
    frame.relativeSharpness === null ? "sharpness not measured" : `sharpness ${percent(frame.relativeSharpness)}`,
    frame.shift === null ? "shift not measured" : `${distanceText(frame.shift)} away`,
    ...(frame.setAside === null ? [] : [`set aside: ${frame.setAside}`]),
  ].join(", ");
}

const ARROWS: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, -1],
  ArrowDown: [0, 1],
};
