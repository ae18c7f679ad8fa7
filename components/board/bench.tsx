"use client";

import { X } from "lucide-react";
import { useState, type ReactNode } from "react";
import { BenchFrames } from "@/components/board/bench-frames";
import { useBoardCommands } from "@/components/board/board-commands";
import { CompareDialog } from "@/components/board/compare-dialog";
import { StackMenu } from "@/components/board/stack-menu";
import { TakeChoice } from "@/components/board/take-choice";
import { LOOSE } from "@/components/board/use-board-place";
import { Button } from "@/components/ui/button";
import { Chip } from "@/components/ui/chip";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import { isMeasuring } from "@/lib/board/comb";
import { benchCrops, spotInFrame } from "@/lib/board/layout";
import type { BoardFrame, BoardStack } from "@/lib/board/model";
import { nameOfStack } from "@/lib/board/moving";
import { stackFacts } from "@/lib/board/summary";
import { countOf, percent } from "@/lib/board/words";

/** The opening towards the tile that the bench belongs to. */
export interface Mouth {
  /** Left edge of the tile; null: no opening. */
  readonly leftPx: number | null;
  readonly widthPx: number;
  readonly gapPx: number;
  readonly opens: "up" | "down";
}

interface BenchProps {
  readonly index: BoardIndex;
  readonly tile: BoardTile;
  readonly widthPx: number;
  readonly mouth: Mouth | null;
  /** Null: the bench is the whole page, as on a phone. */
  readonly onClose: (() => void) | null;
}

/** Border and padding of the sheet on both sides, px. */
const SHEET_PX = 34;

/** The frames of one tile at 100 %, at the same spot, with what was measured of each. */
export function Bench({ index, tile, widthPx, mouth, onClose }: BenchProps) {
  const { canEdit } = useBoardCommands();
  const [takeId, setTakeId] = useState(tile.stack.id);
  const [isWhy, setIsWhy] = useState(false);
  const [compared, setCompared] = useState<string | null>(null);
  const stack = tile.takes.find((take) => take.id === takeId) ?? tile.stack;
  const frames = index.framesOfStack.get(stack.id) ?? [];
  const reference = index.framesById.get(stack.referenceId ?? "") ?? frames[0] ?? null;
  const crops = benchCrops(frames.length, widthPx - SHEET_PX);
  return (
    <Sheet label={`Frames of ${tile.name}`} drop={`stack:${stack.id}`} mouth={mouth}>
      <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
        <h2 className="figures text-lg font-bold">{tile.name}</h2>
        <TakeChoice tile={tile} chosenId={stack.id} onChoose={setTakeId} />
        {stack.isSettled && <Chip>settled</Chip>}
        <span className="figures flex min-w-60 flex-1 flex-wrap gap-x-4 text-sm text-quiet">
          {stackFacts({ ...tile, stack, reference }, frames).map((fact) => (
            <span key={fact}>{fact}</span>
          ))}
        </span>
        <span className="ml-auto flex flex-wrap gap-2">
          {canEdit && <StackMenu index={index} tile={tile} stack={stack} />}
          <Button size="slim" aria-expanded={isWhy} onClick={() => setIsWhy(!isWhy)}>
            Why here?
          </Button>
          {frames.length > 1 && (
            <Button size="slim" onClick={() => setCompared(firstToCompare(frames, reference))}>
              Compare at 100 %
            </Button>
          )}
          {onClose && (
            <Button size="slim" tone="bare" aria-label={`Close ${tile.name}`} onClick={onClose}>
              <X aria-hidden size={18} />
            </Button>
          )}
        </span>
      </div>
      {isWhy && <WhyHere tile={tile} stack={stack} />}
      <BenchFrames
        label={`Frames of ${nameOfStack(index, stack.id)}`}
        perRow={crops.perRow}
        hasPlaces={onClose !== null}
        frames={frames.map((frame) => ({
          projectId: index.board.projectId,
          frame,
          centre: spotInFrame(frame, spotPx(stack, reference ?? frame)),
          size: crops,
          isReference: frame.id === reference?.id,
          isAsked: index.askedFrames.has(frame.id),
          isWhy,
          isMeasuring: isMeasuring(frame, frames),
          onCompare: frame.id === reference?.id ? null : () => setCompared(frame.id),
        }))}
      />
      {compared !== null && reference && (
        <CompareDialog
          index={index}
          name={tile.name}
          stack={stack}
          frames={frames}
          reference={reference}
          frameId={compared}
          onChange={setCompared}
        />
      )}
    </Sheet>
  );
}

interface LooseBenchProps {
  readonly index: BoardIndex;
  readonly widthPx: number;
  readonly onClose: (() => void) | null;
}

/** The frames that are in no stack, whole: the question is what they show. */
export function LooseBench({ index, widthPx, onClose }: LooseBenchProps) {
  const crops = benchCrops(index.loose.length, widthPx - SHEET_PX);
  return (
    <div className="pb-2">
      <Sheet label="Loose frames" drop={LOOSE} mouth={null}>
        <div className="flex flex-wrap items-center gap-x-5 gap-y-1">
          <h2 className="text-lg font-bold">{countOf(index.loose.length, "loose frame")}</h2>
          <span className="text-sm text-quiet">in no stack, so in no tile and in no merge</span>
          {onClose && (
            <Button size="slim" tone="bare" className="ml-auto" aria-label="Close the loose frames" onClick={onClose}>
              <X aria-hidden size={18} />
            </Button>
          )}
        </div>
        <BenchFrames
          label="Loose frames"
          perRow={crops.perRow}
          hasPlaces={onClose !== null}
          frames={index.loose.map((frame) => ({
            projectId: index.board.projectId,
            frame,
            centre: null,
            size: crops,
            isReference: false,
            isAsked: index.askedFrames.has(frame.id),
            isWhy: true,
            isMeasuring: false,
            onCompare: null,
          }))}
        />
      </Sheet>
    </div>
  );
}

interface SheetProps {
  readonly label: string;
  /** Where frames go that are put down on it. */
  readonly drop: string;
  readonly mouth: Mouth | null;
  readonly children: ReactNode;
}

/** The paper of a bench, its edge open towards the tile. */
function Sheet({ label, drop, mouth, children }: SheetProps) {
  return (
    <section
      data-bench
      data-drop={drop}
      aria-label={label}
      className={classNames(
        "relative scroll-mt-12 scroll-mb-3 border-3 border-petrol bg-paper p-3.5 ring-2 ring-paper ring-inset",
        mouth && "my-1",
      )}
    >
      {mouth && mouth.leftPx !== null && (
        <span
          aria-hidden
          style={{ left: mouth.leftPx - 6, width: mouth.widthPx + 6, height: mouth.gapPx + 10 }}
          className={classNames(
            "absolute border-x-3 border-petrol bg-paper",
            mouth.opens === "up" ? "bottom-full -mb-[3px]" : "top-full -mt-[3px]",
          )}
        />
      )}
      {children}
    </section>
  );
}

function WhyHere({ tile, stack }: { readonly tile: BoardTile; readonly stack: BoardStack }) {
  return (
    <p className="mt-2 max-w-[75ch] text-sm">
      <span className="font-semibold">Why {tile.name}: </span>
      {stack.reason}{" "}
      <span className="text-quiet">
        {stack.placedBy === "person" ? "A person placed it." : `Its place is ${percent(stack.confidence)} sure.`}
      </span>
    </p>
  );
}

function spotPx(stack: BoardStack, reference: BoardFrame): { x: number; y: number } {
  return { x: stack.spot.x * reference.widthPx, y: stack.spot.y * reference.heightPx };
}

/** The most doubtful frame first, in its place or in its sharpness: the comparison is for it. */
function firstToCompare(frames: readonly BoardFrame[], reference: BoardFrame | null): string | null {
  const others = frames.filter((frame) => frame.id !== reference?.id);
  const trust = (frame: BoardFrame) => Math.min(frame.confidence, frame.relativeSharpness ?? 1);
  return [...others].sort((a, b) => trust(a) - trust(b))[0]?.id ?? null;
}
