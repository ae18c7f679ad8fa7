import { tileName } from "./tile-name";

/** Names of the places within a grid that nothing has, row by row. */
export function emptyTiles(...of: Parameters<typeof emptyPlaces>): string[] {
  return emptyPlaces(...of).map(({ row, column }) => tileName(row, column));
}

/** Places within a grid that nothing has, row by row. */
export function emptyPlaces(
  { rows, columns }: { readonly rows: number; readonly columns: number },
  places: readonly { readonly row: number | null; readonly column: number | null }[],
): { row: number; column: number }[] {
  const taken = new Set(places.map(({ row, column }) => `${row} ${column}`));
  return Array.from({ length: rows }, (_, r) =>
    Array.from({ length: columns }, (__, c) =>
      taken.has(`${r + 1} ${c + 1}`) ? [] : [{ row: r + 1, column: c + 1 }],
    ).flat(),
  ).flat();
}
