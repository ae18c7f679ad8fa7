import type { ShotOrder } from "@/lib/sorting/types";

export interface Place {
  /** From 1, the top. */
  readonly row: number;
  /** From 1, the left. */
  readonly column: number;
}

/** All places of a grid in the order walked. */
export function walk(rows: number, columns: number, order: ShotOrder): Place[] {
  const isAlongRows = order.along === "rows";
  const lines = isAlongRows ? rows : columns;
  const steps = isAlongRows ? columns : rows;
  const fromBottom = order.from.startsWith("bottom");
  const fromRight = order.from.endsWith("right");
  const places: Place[] = [];
  for (let line = 0; line < lines; line++) {
    for (let step = 0; step < steps; step++) {
      const along = order.turns && line % 2 === 1 ? steps - 1 - step : step;
      const row = isAlongRows ? line : along;
      const column = isAlongRows ? along : line;
      places.push({ row: fromBottom ? rows - row : row + 1, column: fromRight ? columns - column : column + 1 });
    }
  }
  return places;
}
