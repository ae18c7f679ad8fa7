import type { StackDraft } from "./draft";
import { mode } from "./robust";
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
  const box = boxOf(spots.flatMap((spot) => spot.label ?? [])) ?? { top: 1, left: 1 };
  const placed = stacks.flatMap(({ index, fixed }) => {
    const { row = null, column = null } = fixed ?? {};
    return row === null || column === null ? [] : [{ row, column, label: spots[index]?.label ?? null }];
  });
  const isAbsolute = stacks.some(({ fixed }) => fixed?.byPerson && fixed.row !== null);
  const down = lineOffset(
    placed.flatMap(({ row, label }) => (label ? [row - label.row] : [])),
    box.top,
    isAbsolute,
  );
  const across = lineOffset(
    placed.flatMap(({ column, label }) => (label ? [column - label.column] : [])),
    box.left,
    isAbsolute,
  );
  return spots.map((spot, index) => {
    const fixed = stacks[index]?.fixed;
    // By the fact itself, not by its label: what pictures say cannot move it.
    if (fixed && fixed.row !== null && fixed.column !== null) {
      return { row: fixed.row + down.found, column: fixed.column + across.found };
    }
    if (!spot.label) return NOWHERE;
    const [row, column] = [spot.label.row + down.offset, spot.label.column + across.offset];
    return row < 1 || column < 1 ? NOWHERE : { row, column };
  });
}

/**
 * @param known - line minus label of each stack that has both
 * @param first - the least label
 * @returns what is added to labels, and how many lines were found before the first
 */
function lineOffset(known: readonly number[], first: number, isAbsolute: boolean): { offset: number; found: number } {
  const usual = mode(known);
  if (usual === undefined) return { offset: 1 - first, found: 0 };
  const found = isAbsolute ? 0 : Math.max(0, 1 - first - usual);
  return { offset: usual + found, found };
}
