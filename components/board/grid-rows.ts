import { LOOSE } from "@/components/board/use-board-place";
import type { BoardIndex, BoardTile } from "@/lib/board/board-index";

/** One line of the scrolling grid. */
export type GridLine =
  | { readonly kind: "row"; readonly key: string; readonly row: number }
  | { readonly kind: "unplaced"; readonly key: string; readonly tiles: readonly BoardTile[]; readonly isFirst: boolean }
  | { readonly kind: "bench"; readonly key: string; readonly tile: BoardTile; readonly opens: "up" | "down" }
  | { readonly kind: "loose"; readonly key: string };

/**
 * The lines from top to bottom: the loose frames' bench first, the chosen tile's bench right below its row
 * (above it for the last row, so that it opens into the picture), stacks without a place at the end.
 */
export function gridLines(index: BoardIndex, chosen: string | null): GridLine[] {
  const lines: GridLine[] = [];
  if (chosen === LOOSE && index.loose.length > 0) lines.push({ kind: "loose", key: LOOSE });
  const tile = chosen === null ? undefined : index.tiles.get(chosen);
  const { rows, columns } = index.board.grid;
  for (let row = 1; row <= rows; row += 1) {
    const isLast = row === rows && rows > 1;
    if (tile?.row === row && isLast) lines.push({ kind: "bench", key: "bench", tile, opens: "down" });
    lines.push({ kind: "row", key: `row-${row}`, row });
    if (tile?.row === row && !isLast) lines.push({ kind: "bench", key: "bench", tile, opens: "up" });
  }
  const perLine = Math.max(1, columns);
  for (let at = 0; at < index.unplaced.length; at += perLine) {
    const tiles = index.unplaced.slice(at, at + perLine);
    lines.push({ kind: "unplaced", key: `unplaced-${at}`, tiles, isFirst: at === 0 });
    const open = tiles.find((candidate) => candidate.name === chosen);
    if (open) lines.push({ kind: "bench", key: "bench", tile: open, opens: "up" });
  }
  return lines;
}

/** A place of the grid that the arrow keys reach. */
export type GridPlace = Pick<BoardTile, "name" | "row" | "column">;

/**
 * The place that an arrow key leads to: the next one in that direction.
 * @param hasHoles - whether holes are reached too; otherwise they are passed over
 */
export function neighbourPlace(index: BoardIndex, from: GridPlace, key: string, hasHoles: boolean): GridPlace | null {
  const step = STEPS[key];
  if (!step || from.row === null || from.column === null) return null;
  const places: GridPlace[] = [...index.tiles.values(), ...(hasHoles ? index.holes.values() : [])];
  const byPlace = new Map(places.map((place) => [`${place.row},${place.column}`, place]));
  let row = from.row + step[0];
  let column = from.column + step[1];
  while (row >= 1 && column >= 1 && row <= index.board.grid.rows && column <= index.board.grid.columns) {
    const place = byPlace.get(`${row},${column}`);
    if (place) return place;
    row += step[0];
    column += step[1];
  }
  return null;
}

const STEPS: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [0, -1],
  ArrowRight: [0, 1],
  ArrowUp: [-1, 0],
  ArrowDown: [1, 0],
};
