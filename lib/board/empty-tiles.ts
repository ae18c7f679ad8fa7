import { tileName } from "./tile-name";

/** Names of the places within a grid that nothing has, row by row. */
export function emptyTiles(
  { rows, columns }: { readonly rows: number; readonly columns: number },
  places: readonly { readonly row: number | null; readonly column: number | null }[],
): string[] {
  const taken = new Set(places.map(({ row, column }) => `${row} ${column}`));
  return Array.from({ length: rows }, (_, r) =>
    Array.from({ length: columns }, (__, c) => (taken.has(`${r + 1} ${c + 1}`) ? [] : [tileName(r + 1, c + 1)])).flat(),
  ).flat();
}
