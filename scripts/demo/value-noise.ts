import type { Field } from "./raster";
import { mixSeeds, mixThree } from "./seeded-random";

export interface NoiseOctave {
  /** Distance of the lattice's points, px; may differ across and down (grain of wood, layers of cloud). */
  readonly cellWidthPx: number;
  readonly cellHeightPx: number;
  /** The octave adds values between -strength and +strength. */
  readonly strength: number;
  readonly seed: number;
}

function latticeRow(row: number, count: number, seed: number, into: Float32Array): void {
  for (let i = 0; i < count; i++) into[i] = mixThree(seed, row, i) / 2147483648 - 1;
}

const smooth = (t: number) => t * t * (3 - 2 * t);

/**
 * Adds one octave of value noise to a field: random values on a lattice, joined smoothly.
 * Source: value noise as in any textbook of computer graphics (common practice).
 */
export function addNoiseOctave(field: Field, octave: NoiseOctave): void {
  const { data, widthPx, heightPx } = field;
  const columns = Math.ceil((widthPx + 1) / octave.cellWidthPx) + 2;
  const upper = new Float32Array(columns);
  const lower = new Float32Array(columns);
  const blended = new Float32Array(columns);
  const weight = new Float32Array(widthPx);
  const cellEnd = new Int32Array(columns);
  for (let x = 0; x < widthPx; x++) {
    const at = x / octave.cellWidthPx;
    weight[x] = smooth(at - Math.floor(at));
    cellEnd[Math.floor(at)] = x + 1;
  }
  let filledRow = Number.NaN;
  for (let y = 0; y < heightPx; y++) {
    const at = y / octave.cellHeightPx;
    const row = Math.floor(at);
    if (row !== filledRow) {
      latticeRow(row, columns, octave.seed, upper);
      latticeRow(row + 1, columns, octave.seed, lower);
      filledRow = row;
    }
    const down = smooth(at - row);
    for (let i = 0; i < columns; i++) {
      blended[i] = octave.strength * ((upper[i] ?? 0) + down * ((lower[i] ?? 0) - (upper[i] ?? 0)));
    }
    addRow(data, y * widthPx, { blended, cellEnd, weight });
  }
}

/** @param row.cellEnd - for each cell of the lattice the first px after it */
function addRow(
  data: Float32Array,
  start: number,
  row: { blended: Float32Array; cellEnd: Int32Array; weight: Float32Array },
): void {
  const { blended, cellEnd, weight } = row;
  const { length } = weight;
  let x = 0;
  for (let cell = 0; x < length; cell++) {
    const left = blended[cell] as number;
    const rise = (blended[cell + 1] as number) - left;
    const end = cellEnd[cell] as number;
    for (; x < end; x++) data[start + x] = (data[start + x] as number) + left + (weight[x] as number) * rise;
  }
}

/**
 * Adds octaves from `cellPx` down to `smallestCellPx`, each half the size and `gain` times the strength of the one before.
 * @param options.stretch - how many times wider than high the cells are; 1 has no direction
 */
export function addFractalNoise(
  field: Field,
  options: { cellPx: number; smallestCellPx: number; strength: number; gain: number; seed: number; stretch?: number },
): void {
  let strength = options.strength;
  const stretch = options.stretch ?? 1;
  for (let cell = options.cellPx, octave = 0; cell >= options.smallestCellPx; cell /= 2, octave++) {
    addNoiseOctave(field, {
      cellWidthPx: Math.max(1, cell * stretch),
      cellHeightPx: cell,
      strength,
      seed: mixSeeds(options.seed, octave),
    });
    strength *= options.gain;
  }
}
