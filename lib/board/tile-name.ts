const LETTERS = 26;

/**
 * Name of a tile: row letters, then the column's number.
 * @param row - 1 is the top
 * @param column - 1 is the left
 * @returns A1, B12; row 26 is Z, 27 is AA, as spreadsheets count
 * @throws RangeError when row or column is not a whole number of 1 or more
 */
export function tileName(row: number, column: number): string {
  if (!Number.isInteger(column) || column < 1)
    throw new RangeError(`column must be a whole number of 1 or more, got ${column}`);
  return `${rowLetters(row)}${column}`;
}

/** Letters of a row: 1 is A, 26 Z, 27 AA, 702 ZZ, 703 AAA. */
export function rowLetters(row: number): string {
  if (!Number.isInteger(row) || row < 1) throw new RangeError(`row must be a whole number of 1 or more, got ${row}`);
  let letters = "";
  for (let rest = row; rest > 0; rest = Math.floor((rest - 1) / LETTERS)) {
    letters = String.fromCharCode(65 + ((rest - 1) % LETTERS)) + letters;
  }
  return letters;
}

/**
 * The place that a tile's name says: "a4" and "A4" are row 1, column 4.
 * @returns null where it is no tile's name
 */
export function placeOfName(name: string): { readonly row: number; readonly column: number } | null {
  const [, letters, digits] = /^([A-Za-z]{1,3})([1-9]\d{0,3})$/.exec(name.trim()) ?? [];
  if (letters === undefined || digits === undefined) return null;
  const row = [...letters.toUpperCase()].reduce((sum, letter) => sum * LETTERS + letter.charCodeAt(0) - 64, 0);
  return { row, column: Number(digits) };
}
