import type { BoardIndex } from "@/lib/board/board-index";
import { LINES_MOST } from "@/lib/board/look-up";
import { targetOfName, type Moving, type Target } from "@/lib/board/moving";
import { placeOfName, rowLetters } from "@/lib/board/tile-name";

export type MoveTo = { readonly target: Target } | { readonly problem: string | null };

/**
 * What a person wrote into "Move to": a tile's name, "loose", "new stack", "no place", or "Stack 1".
 * @returns the target, or why it is none, in words; null while nothing is written
 */
export function parseMoveTo(index: BoardIndex, moving: Moving, text: string): MoveTo {
  const said = text.trim().toLowerCase().replace(/\s+/g, " ");
  if (said === "") return { problem: null };
  if (said === "loose") return { target: { kind: "loose" } };
  if (said === "new stack" || said === "new") {
    if (moving.kind === "frames") return { target: { kind: "new-stack" } };
    return { problem: "It is a stack already. Write a place, as A4." };
  }
  if (said === "no place") {
    if (moving.kind === "stack") return { target: { kind: "out" } };
    return { problem: "Frames without a place are loose: write loose, or new stack." };
  }
  const unplaced = index.unplaced.find(({ name }) => name.toLowerCase() === said);
  const place = placeOfName(said.replace(" ", ""));
  if (place && (place.row > LINES_MOST || place.column > LINES_MOST)) {
    return { problem: `A grid reaches to row ${rowLetters(LINES_MOST)} and column ${LINES_MOST} at the most.` };
  }
  const target = unplaced ? targetOfName(index, unplaced.name) : place && ({ kind: "place", ...place } as const);
  if (target) return { target };
  if (/^\d+ ?[a-z]+$/.test(said)) {
    const [, digits = "", letters = ""] = /^(\d+) ?([a-z]+)$/.exec(said) ?? [];
    return { problem: `The row's letters come first: ${letters.toUpperCase()}${digits}.` };
  }
  return { problem: `There is no place called ${text.trim()}. Write a tile as A4, or one of the words below.` };
}

/** The words that may be written instead of a tile's name. */
export function moveToWords(index: BoardIndex, moving: Moving): string[] {
  const words = moving.kind === "frames" ? ["loose", "new stack"] : ["loose", "no place"];
  return [...words, ...(moving.kind === "frames" ? index.unplaced.slice(0, 3).map(({ name }) => name) : [])];
}
