"use client";

import { pointerWithin, type CollisionDetection } from "@dnd-kit/core";
import { useEffect, useRef } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { aimAt, readGrip, type Grip } from "@/components/board/grip";
import { useHand, useInHand, type Carried } from "@/components/board/hand";
import { usePutDown } from "@/components/board/use-put-down";
import type { BoardIndex } from "@/lib/board/board-index";
import { nameOfTarget, startTarget, stepTarget, type Target } from "@/lib/board/moving";
import { nameOfMoved, outcomeOf } from "@/lib/board/outcome";

/** What a drag does from pick up to put down, whatever it is done with. */
export function useDragging(index: BoardIndex) {
  const hand = useHand();
  const { announce } = useBoardCommands();
  const putDown = usePutDown(index);
  const held = useRef<{ grip: Grip; element: HTMLElement } | null>(null);
  const isByPointer = useInHand(({ carried }) => carried?.by === "pointer");
  const sayAim = ({ moving, target }: Carried) => {
    if (target) announce(aimSentence(index, moving, target));
  };
  const lookNow = usePointer(isByPointer, (point) => {
    const { carried } = hand.get();
    if (!held.current || !carried) return;
    const { target, moving } = aimAt(index, held.current.grip, point);
    if (hand.aim(target, moving) && moving === undefined) sayAim({ ...carried, target });
  });

  return {
    grip(element: HTMLElement): boolean {
      const grip = readGrip(index, hand.get().selected, element.dataset.grip ?? "");
      held.current = grip && { grip, element };
      return grip !== null;
    },
    start({ activatorEvent }: { readonly activatorEvent: Event }) {
      if (!held.current) return;
      const { moving } = held.current.grip;
      const isByKeys = activatorEvent instanceof KeyboardEvent;
      hand.pickUp(moving, isByKeys ? "keys" : "pointer", isByKeys ? startTarget(index, moving) : null);
      if (moving.kind === "frames" && moving.frameIds.length === 0) return;
      announce(
        `Picked up ${nameOfMoved(index, moving)}.${isByKeys ? " Arrow keys move it from tile to tile, Enter puts it down, Escape puts it back." : ""}`,
      );
    },
    end() {
      // A quick hand lets go before the next drawn frame: it is put down where the pointer is, not where it was.
      lookNow();
      const { carried } = hand.get();
      hand.letGo();
      if (!carried) return;
      const isGiven = carried.target !== null && putDown(carried.moving, carried.target);
      if (carried.target === null) announce("Put back: there is no place under it.");
      if (carried.by === "keys") focusAfter(index, isGiven ? carried.target : null, held.current?.element);
    },
    cancel() {
      const { carried } = hand.get();
      hand.letGo();
      announce("Put back.");
      if (carried?.by === "keys") focusAfter(index, null, held.current?.element);
    },
    /** Dragging by keyboard: one place on; where it is drawn, px of the window. */
    async step(key: string): Promise<{ x: number; y: number } | null> {
      const { carried } = hand.get();
      const next = carried && stepTarget(index, carried.target, key);
      if (!carried || !next) {
        announce("There is no further place that way.");
        return null;
      }
      hand.aim(next);
      sayAim({ ...carried, target: next });
      hand.reveal?.(next);
      await nextFrames();
      const part = document.querySelector(`[data-place="${CSS.escape(nameOfTarget(index, next))}"]`);
      const box = part?.getBoundingClientRect();
      return box ? { x: box.left, y: box.bottom } : null;
    },
    areaUnderPointer: AREA_UNDER_POINTER,
  };
}

/** Rail or well, for scrolling only: what is aimed at is found by `aimAt`. */
const AREA_UNDER_POINTER: CollisionDetection = (input) => pointerWithin(input).slice(0, 1);

function aimSentence(index: BoardIndex, moving: Carried["moving"], target: Target): string {
  return `${nameOfMoved(index, moving)} over ${nameOfTarget(index, target)}. ${outcomeOf(index, moving, target).sentence}`;
}

/**
 * Where the pointer is, at most once a drawn frame; also when the page scrolls under it.
 * @returns tells of a place at once that the next drawn frame would tell of
 */
function usePointer(isOn: boolean, onPoint: (point: { x: number; y: number }) => void): () => void {
  const latest = useRef(onPoint);
  const hurry = useRef<() => void>(() => undefined);
  useEffect(() => {
    latest.current = onPoint;
  });
  useEffect(() => {
    if (!isOn) return;
    let point: { x: number; y: number } | null = null;
    let request = 0;
    const look = () => {
      request = 0;
      if (point) latest.current(point);
    };
    const schedule = () => {
      if (request === 0) request = requestAnimationFrame(look);
    };
    hurry.current = () => {
      if (request === 0) return;
      cancelAnimationFrame(request);
      look();
    };
    const move = (event: MouseEvent | TouchEvent) => {
      const at = "touches" in event ? event.touches[0] : event;
      if (!at) return;
      point = { x: at.clientX, y: at.clientY };
      schedule();
    };
    window.addEventListener("mousemove", move);
    window.addEventListener("touchmove", move);
    window.addEventListener("scroll", schedule, true);
    return () => {
      hurry.current = () => undefined;
      cancelAnimationFrame(request);
      window.removeEventListener("mousemove", move);
      window.removeEventListener("touchmove", move);
      window.removeEventListener("scroll", schedule, true);
    };
  }, [isOn]);
  return () => hurry.current();
}

/** Two drawn frames: after the first the list has scrolled, after the second its new lines are drawn. */
function nextFrames(): Promise<void> {
  return new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(() => resolve())));
}

/** To the tile that it went to, or back to the grip; a grip that is gone leaves the focus to its tile. */
function focusAfter(index: BoardIndex, target: Target | null, grip: HTMLElement | undefined) {
  requestAnimationFrame(() => {
    if (document.querySelector('[role="dialog"]')) return;
    if (target === null && grip?.isConnected) return grip.focus();
    const name = target && nameOfTarget(index, target);
    const tile = name && document.querySelector<HTMLElement>(`[data-tile="${CSS.escape(name)}"]`);
    (tile || document.querySelector<HTMLElement>("[data-tile]"))?.focus();
  });
}
