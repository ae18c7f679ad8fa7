/** What a file's name says about its place in the camera's count. */
export interface FileNumber {
  /** The name without its number. */
  readonly prefix: string;
  readonly number: number;
  /** How many numbers there are before the counter starts again: 9 999 for four digits. */
  readonly period: number;
}

/** Free characters and number of a DCF file name. Source: CIPA DC-009 (DCF 2.0), 3.2.2. */
const DCF_FILE = /^[0-9A-Z_]{4}(\d{4})$/;
/** Number and free characters of a DCF folder name. Source: the same, 3.1.2. */
const DCF_FOLDER = /^([1-9]\d{2})[0-9A-Z_]{5}$/i;
/** More digits than this are a date, an identifier or a checksum; the last ones still order the files. */
const MOST_DIGITS = 9;

/** True for a name without extension by the DCF rule: four free characters 0-9 A-Z _ and a number from 0001 to 9999. */
export function isDcfFileName(name: string): boolean {
  const match = DCF_FILE.exec(name);
  return match !== null && match[1] !== "0000";
}

/**
 * The counter in a file name without extension: the four digits of a DCF name, else the last run of digits.
 * @returns null where the name has no digit
 * @example fileNumber("HARB0042") // { prefix: "HARB", number: 42, period: 9999 }
 */
export function fileNumber(name: string): FileNumber | null {
  if (isDcfFileName(name)) return { prefix: name.slice(0, 4), number: Number(name.slice(4)), period: 9999 };
  const match = /^(.*?)(\d+)(\D*)$/.exec(name);
  if (!match) return null;
  const digits = (match[2] ?? "").slice(-MOST_DIGITS);
  return { prefix: `${match[1] ?? ""}#${match[3] ?? ""}`, number: Number(digits), period: 10 ** digits.length - 1 };
}

/** Number of a DCF folder (100 to 999) from a path; null where its last part is none. */
export function folderNumber(folder: string | null): number | null {
  const match = DCF_FOLDER.exec(folder?.split("/").at(-1) ?? "");
  return match ? Number(match[1]) : null;
}

/**
 * Lays a wrapped counter out in one line by cutting it at its largest circular gap.
 * @param numbers - whole numbers, any order; equal ones stay equal
 * @param period - how many different numbers the counter has
 * @returns for each input its number, raised by one period where it comes after the roll-over
 * **Edges**: of equal gaps the one before the smallest number wins, so that a full count stays as it is.
 * @example unwrapCounter([9998, 9999, 1, 3], 9999) // [9998, 9999, 10000, 10002]
 */
export function unwrapCounter(numbers: readonly number[], period: number): number[] {
  const sorted = [...new Set(numbers)].sort((a, b) => a - b);
  const first = sorted[0];
  const last = sorted.at(-1);
  if (first === undefined || last === undefined || last >= first + period) return [...numbers];
  let start = first;
  let largest = first + period - last;
  for (let index = 1; index < sorted.length; index++) {
    const here = sorted[index] ?? 0;
    const gap = here - (sorted[index - 1] ?? 0);
    if (gap > largest) {
      largest = gap;
      start = here;
    }
  }
  return numbers.map((number) => (number < start ? number + period : number));
}
