"use client";

import { useLayoutEffect, useState } from "react";
import { createPortal } from "react-dom";
import { useInHand, type Carried } from "@/components/board/hand";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex } from "@/lib/board/board-index";
import { nameOfTarget, stackOfTarget, tileAt, zoneAt, type Occupied } from "@/lib/board/moving";
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
  const hasZones = isTaken && outcome.state !== "impossible" && carried.by !== "keys" && zoneAt(box, 0) !== undefined;
  return createPortal(
    <span
      aria-hidden
      className={classNames(
        "pointer-events-none absolute inset-0 z-30 flex flex-col justify-end outline-3 ring-5 ring-paper",
        outcome.state === "impossible" ? "outline-dashed outline-ink" : "outline-petrol",
      )}
    >
      {hasZones ? (
        <Zones chosen={target.kind === "place" ? target.occupied : undefined} />
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

const ANSWERS: readonly { readonly occupied: Occupied; readonly label: string }[] = [
  { occupied: "swap", label: "Swap places" },
  { occupied: "push", label: "Push the line on" },
  { occupied: "take", label: "As another take" },
];

/** Three thirds of a taken tile, each an answer to what happens to its stack. */
function Zones({ chosen }: { readonly chosen: Occupied | undefined }) {
  return ANSWERS.map(({ occupied, label }) => (
    <span key={occupied} className="flex flex-1 items-center justify-center border-t border-line first:border-t-0">
      <span
        className={classNames(
          "px-1.5 text-sm leading-6 font-semibold",
          chosen === occupied ? "bg-petrol text-petrol-on" : "bg-paper text-ink",
        )}
      >
        {label}
      </span>
    </span>
  ));
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
