"use client";

import { useId, useState, type KeyboardEvent } from "react";
import { LOOSE } from "@/components/board/use-board-place";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex } from "@/lib/board/board-index";
import { findFrames, type FoundFrame } from "@/lib/board/find-frames";

/** As many as are read at a glance. */
const FOUND_MOST = 8;

interface FrameFinderProps {
  readonly index: BoardIndex;
  readonly onChoose: (tile: string) => void;
}

/** A field that finds a frame by its name or number and opens the tile that it lies in (combobox, WAI-ARIA APG). */
export function FrameFinder({ index, onChoose }: FrameFinderProps) {
  const [typed, setTyped] = useState("");
  const [isOpen, setIsOpen] = useState(false);
  const [activeAt, setActiveAt] = useState(0);
  const id = useId();
  const found = isOpen ? findFrames(index, typed, FOUND_MOST) : [];
  const active = found[Math.min(activeAt, found.length - 1)];
  const optionId = (frame: FoundFrame) => `${id}-${frame.frame.id}`;
  const choose = ({ frame, tile }: FoundFrame) => {
    setTyped("");
    setIsOpen(false);
    onChoose(tile ?? LOOSE);
    showFrame(frame.id, frame.stackId);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
    if (step !== undefined && found.length > 0) {
      event.preventDefault();
      setActiveAt((Math.min(activeAt, found.length - 1) + step + found.length) % found.length);
    } else if (event.key === "Enter" && active) {
      event.preventDefault();
      choose(active);
    } else if (event.key === "Escape") {
      setIsOpen(false);
      setTyped("");
    }
  };
  return (
    <div className="relative">
      <input
        type="text"
        role="combobox"
        aria-label="Find a frame"
        aria-expanded={found.length > 0}
        aria-controls={`${id}-list`}
        aria-autocomplete="list"
        aria-activedescendant={active ? optionId(active) : undefined}
        autoComplete="off"
        spellCheck={false}
        placeholder="Find a frame"
        value={typed}
        onChange={(event) => {
          setTyped(event.target.value);
          setIsOpen(true);
          setActiveAt(0);
        }}
        onBlur={() => setIsOpen(false)}
        onKeyDown={onKeyDown}
        className="figures min-h-7 w-40 border border-line bg-paper px-2 text-sm placeholder:text-quiet pointer-coarse:min-h-11"
      />
      <ul
        id={`${id}-list`}
        role="listbox"
        aria-label="Frames found"
        hidden={found.length === 0}
        className="absolute right-0 z-50 mt-1 min-w-56 border border-ink bg-paper py-1 shadow-float"
      >
        {found.map((each) => (
          <li
            key={each.frame.id}
            id={optionId(each)}
            role="option"
            aria-selected={each === active}
            // The field keeps the focus: a press must not blur it before it counts.
            onPointerDown={(event) => event.preventDefault()}
            onClick={() => choose(each)}
            className={classNames(
              "flex min-h-8 cursor-pointer items-center gap-4 px-3 pointer-coarse:min-h-11",
              each === active && "bg-ink text-paper",
            )}
          >
            <span className="figures font-bold">{each.frame.name}</span>
            <span className="ml-auto">{each.tile ?? "loose"}</span>
          </li>
        ))}
      </ul>
      {isOpen && typed.trim() !== "" && found.length === 0 && (
        <p
          role="status"
          className="absolute right-0 z-50 mt-1 min-w-56 border border-ink bg-paper px-3 py-1.5 shadow-float"
        >
          No frame has this in its name.
        </p>
      )}
    </div>
  );
}

/** The bench unfolds, scrolls and may have another take open: looked for until it is there, ms. */
const LOOK_EVERY_MS = 50;
const LOOK_FOR_MS = 3_000;

/** Brings a frame on the bench into view, with the focus on it. */
function showFrame(frameId: string, stackId: string | null): void {
  const giveUpAt = performance.now() + LOOK_FOR_MS;
  const look = () => {
    const place = document.querySelector<HTMLElement>(`[data-frame="${CSS.escape(frameId)}"]`);
    if (place) return focusOn(place);
    if (performance.now() > giveUpAt) return;
    const take = stackId === null ? null : document.querySelector<HTMLElement>(`[data-take="${CSS.escape(stackId)}"]`);
    if (take?.getAttribute("aria-pressed") === "false") take.click();
    setTimeout(look, LOOK_EVERY_MS);
  };
  // After the board has brought the tile into view by itself.
  setTimeout(look, 2 * LOOK_EVERY_MS);
}

function focusOn(place: HTMLElement): void {
  const target = place.querySelector<HTMLElement>("button, a[href], [tabindex='0']") ?? place;
  if (target === place) place.tabIndex = -1;
  target.focus({ preventScroll: true });
  place.scrollIntoView({ block: "nearest" });
}
