"use client";

import type { KeyboardEvent, MouseEvent } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { targetOfPart } from "@/components/board/grip";
import { useHand } from "@/components/board/hand";
import { usePutDown } from "@/components/board/use-put-down";
import type { BoardIndex } from "@/lib/board/board-index";
import { nameOfTarget, type Target } from "@/lib/board/moving";
import { nameOfMoved, outcomeOf } from "@/lib/board/outcome";

/** Moving without dragging: one tap picks up, one on a place shows what would happen, the next on it does it. */
export function useTapping(index: BoardIndex) {
  const hand = useHand();
  const { announce } = useBoardCommands();
  const putDown = usePutDown(index);
  return {
    onClickCapture(event: MouseEvent) {
      const { carried } = hand.get();
      if (carried?.by !== "taps" || !(event.target instanceof Element)) return;
      const part = event.target.closest<HTMLElement>("[data-place], [data-drop]");
      const target = part && targetOfPart(index, carried.moving, part, { x: event.clientX, y: event.clientY });
      if (!target) return;
      event.preventDefault();
      event.stopPropagation();
      const isSecond = carried.target !== null && nameOfTarget(index, carried.target) === nameOfTarget(index, target);
      if (isSecond) {
        hand.letGo();
        putDown(carried.moving, target);
        return;
      }
      // The first tap only shows: which zone of a taken tile it fell on means nothing yet.
      const shown: Target =
        target.kind === "place" ? { kind: "place", row: target.row, column: target.column } : target;
      hand.aim(shown);
      const { sentence } = outcomeOf(index, carried.moving, shown);
      announce(`${nameOfMoved(index, carried.moving)} over ${nameOfTarget(index, shown)}. ${sentence}`);
    },
    onKeyDownCapture(event: KeyboardEvent) {
      if (event.key !== "Escape" || hand.get().carried?.by !== "taps") return;
      event.stopPropagation();
      hand.letGo();
      announce("Put back.");
    },
  };
}
