"use client";

import { useBoardCommands } from "@/components/board/board-commands";
import { useHand } from "@/components/board/hand";
import type { BoardIndex } from "@/lib/board/board-index";
import { commandFor, nameOfTarget, type Moving, type Target } from "@/lib/board/moving";
import { outcomeOf } from "@/lib/board/outcome";
import { newId } from "@/lib/ids";

/**
 * Puts something down: sends the command; where the place is taken, asks what happens to its stack; where nothing
 * would change, says so.
 * @returns whether a command was given
 */
export function usePutDown(index: BoardIndex): (moving: Moving, target: Target) => boolean {
  const { run, announce } = useBoardCommands();
  const hand = useHand();
  return (moving, target) => {
    const { state, sentence } = outcomeOf(index, moving, target);
    if (state === "asks") {
      hand.ask({ moving, text: nameOfTarget(index, target), verb: "move" });
      return false;
    }
    const stackId = newId();
    const draft = state === "possible" ? commandFor(index, moving, target, stackId) : null;
    if (!draft) {
      announce(sentence);
      return false;
    }
    if (target.kind === "new-stack") hand.awaitStack(stackId);
    if (target.kind === "out" && moving.kind === "stack") hand.awaitStack(moving.stackId);
    const isGiven = run(draft);
    if (isGiven && moving.kind === "frames") hand.select([]);
    return isGiven;
  };
}
