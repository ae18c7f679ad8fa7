"use client";

import { useEffect, useRef } from "react";
import type { BoardIndex } from "@/lib/board/board-index";
import { countOf } from "@/lib/board/words";

interface SortingNews {
  readonly index: BoardIndex | null;
  readonly isSorted: boolean | undefined;
  /** The board is being asked for: it may be older than the sorting. */
  readonly isFetching: boolean;
  readonly say: (text: string, tone: "news") => void;
}

/** Says what a sorting that was watched came to. The first one, and one that brings frames in, speak for themselves. */
export function useSortingNews({ index, isSorted, isFetching, say }: SortingNews): void {
  const before = useRef<BoardIndex | null>(null);
  useEffect(() => {
    if (!index || isSorted === undefined) return;
    if (!isSorted) {
      before.current ??= index;
      return;
    }
    if (isFetching || before.current === null) return;
    const text = sortingText(before.current, index);
    before.current = null;
    if (text !== null) say(text, "news");
  }, [index, isSorted, isFetching, say]);
}

/** "Sorted again: 3 frames moved."; null: frames came in. */
export function sortingText(before: BoardIndex, after: BoardIndex): string | null {
  if (before.board.frames.length !== after.board.frames.length) return null;
  const was = placesOf(before);
  const moved = [...placesOf(after)].filter(([id, place]) => was.get(id) !== place).length;
  const gone = after.board.questions.length - before.board.questions.length;
  if (moved > 0) return `Sorted again: ${countOf(moved, "frame")} moved.`;
  return gone === 0
    ? "Sorted again: nothing changed."
    : `Sorted again: no frame moved; ${countOf(after.board.questions.length, "question")} now.`;
}

function placesOf({ board, tileOfStack }: BoardIndex): Map<string, string> {
  return new Map(
    board.frames.map(({ id, stackId, setAside }) => {
      const tile = stackId === null ? "loose" : (tileOfStack.get(stackId)?.name ?? "no place");
      return [id, `${tile} ${setAside ?? ""}`];
    }),
  );
}
