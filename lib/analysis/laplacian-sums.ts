/**
 * Sums of the 4-neighbour Laplacian, patch by patch. These run for every pixel of a picture, so they take plain arrays,
 * carry the row's window in variables and add whole numbers.
 */

/** Per patch: pixels counted, their levels, and the Laplacian's sum and sum of squares. */
export interface PatchSums {
  readonly count: Float64Array;
  readonly level: Float64Array;
  readonly response: Float64Array;
  readonly responseSquared: Float64Array;
}

export function makePatchSums(patches: number): PatchSums {
  return {
    count: new Float64Array(patches),
    level: new Float64Array(patches),
    response: new Float64Array(patches),
    responseSquared: new Float64Array(patches),
  };
}

/** A run of pixels of one row: `from` to before `end`, with the distance to the rows above and below in the array. */
export interface PixelRun {
  readonly from: number;
  readonly end: number;
  readonly above: number;
  readonly below: number;
}

/** Adds a run of any picture to one patch, in float64: exact for whole numbers up to 16 bits. */
export function addRun(data: ArrayLike<number>, run: PixelRun, sums: PatchSums, patch: number): void {
  const { from, end, above, below } = run;
  if (end <= from) return;
  let level = 0;
  let response = 0;
  let squared = 0;
  let left = data[from - 1] ?? 0;
  let here = data[from] ?? 0;
  for (let i = from; i < end; i += 1) {
    const right = data[i + 1] ?? 0;
    const value = (data[i + above] ?? 0) + (data[i + below] ?? 0) + left + right - 4 * here;
    level += here;
    response += value;
    squared += value * value;
    left = here;
    here = right;
  }
  addTo(sums, patch, { count: end - from, level, response, squared });
}

/** 4 080 squared times this stays under 2^31: squares at half size (sums of four bytes) in 32-bit integers. */
const LONGEST_HALF_RUN = 128;

/** `addRun` in 32-bit integers, for sums of four bytes: three times as fast. */
export function addHalfRun(data: Int32Array, run: PixelRun, sums: PatchSums, patch: number): void {
  const { above, below } = run;
  for (let from = run.from; from < run.end; from += LONGEST_HALF_RUN) {
    const end = Math.min(run.end, from + LONGEST_HALF_RUN);
    let level = 0;
    let response = 0;
    let squared = 0;
    let left = data[from - 1] ?? 0;
    let here = data[from] ?? 0;
    for (let i = from; i < end; i = (i + 1) | 0) {
      const right = data[i + 1] ?? 0;
      const value = ((data[i + above] ?? 0) + (data[i + below] ?? 0) + left + right - 4 * here) | 0;
      level = (level + here) | 0;
      response = (response + value) | 0;
      squared = (squared + Math.imul(value, value)) | 0;
      left = here;
      here = right;
    }
    addTo(sums, patch, { count: end - from, level, response, squared });
  }
}

/** 1 020 squared times four times this stays under 2^31: squares of four pixels a step are summed in 32-bit integers. */
const LONGEST_PAIR_RUN = 500;

/**
 * The same for two rows of an 8-bit picture at once, 2 x 2 pixels a step, which also gives the rows at half size.
 * Half the loads of two single rows; `level` is left to the half-size sums.
 * @param from - index of the upper row's first pixel
 * @param pairs - pairs of columns
 * @param half - receives the sum of each 2 x 2 pixels, 0 to 1 020, from `halfFrom`
 */
export function addByteRowPair(
  data: Uint8Array,
  widthPx: number,
  run: { readonly from: number; readonly pairs: number; readonly half: Int32Array; readonly halfFrom: number },
  sums: PatchSums,
  patch: number,
): void {
  for (let done = 0; done < run.pairs; done += LONGEST_PAIR_RUN) {
    const pairs = Math.min(LONGEST_PAIR_RUN, run.pairs - done);
    addBytePairs(
      data,
      widthPx,
      { ...run, from: run.from + 2 * done, pairs, halfFrom: run.halfFrom + done },
      sums,
      patch,
    );
  }
}

function addBytePairs(
  data: Uint8Array,
  widthPx: number,
  run: { readonly from: number; readonly pairs: number; readonly half: Int32Array; readonly halfFrom: number },
  sums: PatchSums,
  patch: number,
): void {
  const { half, halfFrom } = run;
  const next = widthPx;
  const below = 2 * widthPx;
  let response = 0;
  let squared = 0;
  let i = run.from;
  // Upper row a, lower row b; 0 and 1 are the pair's columns.
  let aLeft = data[i - 1] ?? 0;
  let bLeft = data[i + next - 1] ?? 0;
  let a0 = data[i] ?? 0;
  let b0 = data[i + next] ?? 0;
  for (let h = halfFrom, end = halfFrom + run.pairs; h < end; h = (h + 1) | 0) {
    const a1 = data[i + 1] ?? 0;
    const b1 = data[i + next + 1] ?? 0;
    const aRight = data[i + 2] ?? 0;
    const bRight = data[i + next + 2] ?? 0;
    const upper0 = ((data[i - widthPx] ?? 0) + b0 + aLeft + a1 - 4 * a0) | 0;
    const upper1 = ((data[i - widthPx + 1] ?? 0) + b1 + a0 + aRight - 4 * a1) | 0;
    const lower0 = (a0 + (data[i + below] ?? 0) + bLeft + b1 - 4 * b0) | 0;
    const lower1 = (a1 + (data[i + below + 1] ?? 0) + b0 + bRight - 4 * b1) | 0;
    response = (response + upper0 + upper1 + lower0 + lower1) | 0;
    squared =
      (squared +
        Math.imul(upper0, upper0) +
        Math.imul(upper1, upper1) +
        Math.imul(lower0, lower0) +
        Math.imul(lower1, lower1)) |
      0;
    half[h] = a0 + a1 + b0 + b1;
    aLeft = a1;
    bLeft = b1;
    a0 = aRight;
    b0 = bRight;
    i = (i + 2) | 0;
  }
  addTo(sums, patch, { count: 4 * run.pairs, level: 0, response, squared });
}

function addTo(
  sums: PatchSums,
  patch: number,
  run: { readonly count: number; readonly level: number; readonly response: number; readonly squared: number },
): void {
  sums.count[patch] = (sums.count[patch] ?? 0) + run.count;
  sums.level[patch] = (sums.level[patch] ?? 0) + run.level;
  sums.response[patch] = (sums.response[patch] ?? 0) + run.response;
  sums.responseSquared[patch] = (sums.responseSquared[patch] ?? 0) + run.squared;
}
