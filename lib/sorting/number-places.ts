import type { StackDraft } from "./draft";
import { boxOf } from "./walks";
import type { Spot } from "./place-stacks";

/** Final place of a stack: A1 is row 1, column 1. */
export interface Place {
  readonly row: number | null;
  readonly column: number | null;
}

const NOWHERE: Place = { row: null, column: null };

/**
 * Rows and columns from labels. Without facts the grid begins at A1. Stacks placed before keep their places unless a
 * line was found above or left of them, which renumbers all alike; a person's places are absolute, and what would lie
 * before A1 has then no place.
 */
export function numberPlaces(stacks: readonly StackDraft[], spots: readonly Spot[]): Place[] {
  const box = boxOf(spots.flatMap((spot) => spot.label ?? []));
  if (!box) return spots.map(() => NOWHERE);
  const anchor = stacks.find((stack) => stack.fixed?.row && spots[stack.index]?.label);
  const label = anchor && spots[anchor.index]?.label;
  let down = 1 - box.top;
  let across = 1 - box.left;
  if (anchor?.fixed && label) {
    down = (anchor.fixed.row ?? 1) - label.row;
    across = (anchor.fixed.column ?? 1) - label.column;
    if (!stacks.some((stack) => stack.fixed?.byPerson && stack.fixed.row !== null)) {
      down = Math.max(down, 1 - box.top);
      across = Math.max(across, 1 - box.left);
    }
  }
  return spots.map((spot) => {
    if (!spot.label) return NOWHERE;
    const [row, column] = [spot.label.row + down, spot.label.column + across];
    return row < 1 || column < 1 ? NOWHERE : { row, column };
  });
}
