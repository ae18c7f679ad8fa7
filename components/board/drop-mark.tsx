"use client";

import { ArrowRightFromLine } from "lucide-react";
import { useLayoutEffect, useState } from "react";
import { createPortal } from "react-dom";
import { useInHand, type Carried } from "@/components/board/hand";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex } from "@/lib/board/board-index";
import { nameOfTarget, stackOfTarget, tileAt, ZONE_BAND, zoneAt, type Occupied } from "@/lib/board/moving";
import { outcomeOf } from "@/lib/board/outcome";

/**
 * Marks the place that something is held over: an outline, and on the tile itself what it would be. It is drawn into
 * the tile from outside, so that of all tiles none is drawn anew while something passes over them.
 */
export function DropMark({ index }: { readonly index: BoardIndex }) {
  const carried = useInHand((state) => state.carried);
  if (!carried?.target) return null;
  return <Mark key={nameOfTarget(index, carried.target)} index={index} carried={carried} />;
}

interface MarkProps {
  readonly index: BoardIndex;
  readonly carried: Carried;
}

function Mark({ index, carried }: MarkProps) {
  const { target } = carried;
  const name = target === null ? "" : nameOfTarget(index, target);
  const holder = useMarked(name, target ? (stackOfTarget(index, target) ?? null) : null);
  if (!target || !holder) return null;
  const outcome = outcomeOf(index, carried.moving, target);
  const box = holder.getBoundingClientRect();
  const isTaken = carried.moving.kind === "stack" && target.kind === "place" && tileAt(index, target) !== null;
  const hasZones =
    isTaken && outcome.state !== "impossible" && carried.by !== "keys" && zoneAt(box, { x: 0, y: 0 }) !== undefined;
  return createPortal(
    <span
      aria-hidden
      className={classNames(
        "pointer-events-none absolute inset-0 z-30 flex flex-col justify-end outline-3 ring-5 ring-paper",
        outcome.state === "impossible" ? "outline-dashed outline-ink" : "outline-petrol",
      )}
    >
      {hasZones ? (
        <Zones tile={name} chosen={target.kind === "place" ? target.occupied : undefined} isWide={box.width >= 150} />
      ) : (
        box.width >= 100 && (
          <span className="flex min-h-7 items-center bg-paper px-1.5 text-sm leading-4.5 font-semibold">
            {outcome.caption}
          </span>
        )
      )}
    </span>,
    holder,
  );
}

interface ZonesProps {
  readonly tile: string;
  readonly chosen: Occupied | undefined;
  readonly isWide: boolean;
}

/** A taken tile's answers to what happens to its stack: swap in its middle, a band each at the right and lower edge. */
function Zones({ tile, chosen, isWide }: ZonesProps) {
  const bandPercent = `${100 * ZONE_BAND}%`;
  const edgePercent = `${100 * (1 - ZONE_BAND)}%`;
  const toneOf = (occupied: Occupied) => (chosen === occupied ? "bg-petrol text-petrol-on" : "bg-paper text-ink");
  return (
    <>
      <span
        style={{ width: bandPercent, height: edgePercent }}
        className={classNames("absolute top-0 right-0 flex items-center justify-center", toneOf("push"))}
      >
        <ArrowRightFromLine aria-hidden size={18} />
      </span>
      <span
        style={{ height: bandPercent }}
        className={classNames(
          "absolute inset-x-0 bottom-0 flex items-center justify-center overflow-hidden border-t border-line text-sm leading-4.5 font-semibold whitespace-nowrap",
          toneOf("take"),
        )}
      >
        {isWide ? `Another take of ${tile}` : "Another take"}
      </span>
      <span
        style={{ right: bandPercent, bottom: bandPercent }}
        className="absolute top-0 left-0 flex items-center justify-center p-1"
      >
        <span
          className={classNames(
            "px-1.5 py-0.5 text-center text-sm leading-4.5 font-semibold",
            chosen === "push" ? toneOf("push") : toneOf("swap"),
          )}
        >
          {chosen === "push" ? "Shift the rest of the row to the right" : "Swap places"}
        </span>
      </span>
    </>
  );
}

/**
 * The element of a place, marked along with every other part that stands for it (a bracket of the rail, a row of the
 * table); null while it is not drawn.
 */
function useMarked(name: string, stackId: string | null): Element | null {
  const [holder, setHolder] = useState<Element | null>(null);
  useLayoutEffect(() => {
    let marked: Element[] = [];
    const clear = () => marked.forEach((element) => element.removeAttribute("data-aimed"));
    const find = () => {
      clear();
      const parts = [`[data-place="${CSS.escape(name)}"]`, `[data-drop="${CSS.escape(name)}"]`];
      if (stackId !== null) parts.push(`[data-drop="stack:${CSS.escape(stackId)}"]`);
      marked = [...document.querySelectorAll(parts.join(", "))];
      for (const element of marked) element.setAttribute("data-aimed", "");
      setHolder(marked.find((element) => element.hasAttribute("data-place")) ?? null);
    };
    find();
    // A row that had to be scrolled to is drawn a little later.
    const timer = setTimeout(find, LATER_MS);
    return () => {
      clearTimeout(timer);
      clear();
    };
  }, [name, stackId]);
  return holder;
}

const LATER_MS = 60;
