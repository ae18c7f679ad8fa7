import { createAreaAverager, fitLongSide, type FloatPlane } from "@/lib/analysis/area-average";
import { addByteRowPair, addHalfRun, addRun, makePatchSums, type PatchSums } from "@/lib/analysis/laplacian-sums";
import { assertPlane } from "@/lib/analysis/plane";
import { REGISTRATION_LONG_SIDE_PX } from "@/lib/analysis/registration-image";
import type { PatchGrid, Plane } from "@/lib/analysis/types";

/** Patches along the long and the short side (analysis.md step 7). */
const PATCHES_LONG_SIDE = 16;
const PATCHES_SHORT_SIDE = 12;
/** Patches darker than this are divided by it: black has no detail, only noise over nothing. Levels of 255. */
const LEAST_BRIGHTNESS = 1;
/** A half-size pixel is the sum of four, so its levels are four times, its variances sixteen times those of a mean. */
const HALF_PIXELS = 4;

/** What one pass over the pixels finds. */
export interface PatchSharpness {
  readonly laplacianVariance: number;
  readonly patches: PatchGrid;
  /** The picture at most 256 px on its long side, in the plane's own levels. */
  readonly small: FloatPlane;
}

interface Pass {
  readonly plane: Plane;
  readonly halfWidthPx: number;
  readonly columns: number;
  readonly rows: number;
  /** First half-size column of each patch, and the end of the last. */
  readonly bounds: Int32Array;
  readonly full: PatchSums;
  readonly half: PatchSums;
  /** The last three half-size rows, in a ring. */
  readonly ring: Int32Array;
}

/**
 * Sharpness in one pass: Laplacian variance of the whole picture, and of 16 x 12 patches at full and at half size,
 * each divided by the square of the patch's mean brightness (the variance grows with brightness squared).
 * @param plane - one channel as stored (not turned), row-major; 3 px a side or more
 * @param white - the plane's level of white: 255 for 8 bits, 65 535 for 16
 * @returns variance in squared levels of 255; patches 0 or more, 16 along the long side; brightness 0 to 255
 * @throws AnalysisError when smaller than 3 x 3 or `data.length` is not width x height
 * Method and accuracy: kernel [0 1 0; 1 -4 1; 0 1 0], population variance, exact integer sums. Half size is the mean of
 * 2 x 2 pixels; patches begin at even pixels, so that both sizes cover the same ground.
 * Edges: the one-pixel border is left out; an odd last row or column counts at full size only; patches without inner
 * pixels give 0; patches darker than level 1 count as level 1.
 * Source: Pech-Pacheco et al., ICPR 2000, vol. 3, 314-317, doi:10.1109/ICPR.2000.903548; patches: analysis.md step 7.
 */
export function measurePatchSharpness(plane: Plane, white: number): PatchSharpness {
  assertPlane(plane, 3);
  const pass = startPass(plane);
  const halfSize = { widthPx: pass.halfWidthPx, heightPx: plane.heightPx >> 1 };
  const averager = createAreaAverager(
    halfSize,
    fitLongSide(halfSize.widthPx, halfSize.heightPx, REGISTRATION_LONG_SIDE_PX),
  );
  for (let y = 0; y < halfSize.heightPx; y += 1) {
    const patchRow = pass.columns * Math.floor(((y + 0.5) * pass.rows) / halfSize.heightPx);
    addFullRows(pass, y, patchRow);
    averager.addRow(pass.ring, (y % 3) * pass.halfWidthPx);
    if (y >= 2) addHalfRow(pass, y - 1, halfSize.heightPx);
  }
  const small = averager.finish();
  const scale = 255 / white;
  return {
    laplacianVariance: varianceOf(totalOf(pass.full)) * scale * scale,
    patches: toGrid(pass, scale),
    small: { ...small, data: small.data.map((value) => value / HALF_PIXELS) },
  };
}

function startPass(plane: Plane): Pass {
  const isLandscape = plane.widthPx >= plane.heightPx;
  const columns = isLandscape ? PATCHES_LONG_SIDE : PATCHES_SHORT_SIDE;
  const rows = isLandscape ? PATCHES_SHORT_SIDE : PATCHES_LONG_SIDE;
  const halfWidthPx = plane.widthPx >> 1;
  return {
    plane,
    halfWidthPx,
    columns,
    rows,
    bounds: Int32Array.from({ length: columns + 1 }, (_, i) => Math.floor((i * halfWidthPx) / columns)),
    full: makePatchSums(columns * rows),
    half: makePatchSums(columns * rows),
    ring: new Int32Array(3 * halfWidthPx),
  };
}

/** Full-size rows 2 y and 2 y + 1 into the full sums, and their half-size row into the ring. */
function addFullRows(pass: Pass, y: number, patchRow: number): void {
  const { widthPx, heightPx, data } = pass.plane;
  const top = 2 * y;
  const isInner = top >= 1 && top + 2 < heightPx;
  if (data instanceof Uint8Array && isInner) {
    addInnerByteRows(pass, data, y, patchRow);
    return;
  }
  halveRows(pass, y);
  for (const row of [top, top + 1]) {
    if (row < 1 || row > heightPx - 2) continue;
    for (let column = 0; column < pass.columns; column += 1) {
      const from = Math.max(1, 2 * (pass.bounds[column] ?? 0));
      const end = column === pass.columns - 1 ? widthPx - 1 : 2 * (pass.bounds[column + 1] ?? 0);
      addFullRun(pass, row, Math.min(from, widthPx - 1), Math.min(end, widthPx - 1), patchRow + column);
    }
  }
}

function addFullRun(pass: Pass, row: number, fromColumn: number, endColumn: number, patch: number): void {
  const { widthPx, data } = pass.plane;
  const offset = row * widthPx;
  const run = { from: offset + fromColumn, end: offset + endColumn, above: -widthPx, below: widthPx };
  addRun(data, run, pass.full, patch);
}

/** The fast way: all pairs of columns whose neighbours exist, then what is left at both ends. */
function addInnerByteRows(pass: Pass, data: Uint8Array, y: number, patchRow: number): void {
  const { widthPx } = pass.plane;
  const from = 2 * y * widthPx;
  const halfRow = (y % 3) * pass.halfWidthPx;
  // Pair j covers columns 2 j and 2 j + 1 and looks at 2 j - 1 and 2 j + 2.
  const endPair = (widthPx - 1) >> 1;
  for (let column = 0; column < pass.columns; column += 1) {
    const first = Math.max(1, pass.bounds[column] ?? 0);
    const end = Math.min(endPair, pass.bounds[column + 1] ?? 0);
    if (end <= first) continue;
    const run = { from: from + 2 * first, pairs: end - first, half: pass.ring, halfFrom: halfRow + first };
    addByteRowPair(data, widthPx, run, pass.full, patchRow + column);
  }
  const lastPatch = patchRow + pass.columns - 1;
  for (const row of [2 * y, 2 * y + 1]) {
    addFullRun(pass, row, 1, 2, patchRow + firstPatchColumn(pass));
    if (2 * endPair > 1) addFullRun(pass, row, 2 * endPair, widthPx - 1, lastPatch);
  }
  halveColumn(pass, y, 0);
  if (endPair < pass.halfWidthPx) halveColumn(pass, y, endPair);
}

/** Column of the patch that holds the leftmost pixel: not the first where there are fewer pixels than patches. */
function firstPatchColumn(pass: Pass): number {
  let column = 0;
  while (column < pass.columns - 1 && (pass.bounds[column + 1] ?? 0) <= 0) column += 1;
  return column;
}

function halveRows(pass: Pass, y: number): void {
  for (let x = 0; x < pass.halfWidthPx; x += 1) halveColumn(pass, y, x);
}

function halveColumn(pass: Pass, y: number, x: number): void {
  const { data, widthPx } = pass.plane;
  const i = 2 * y * widthPx + 2 * x;
  pass.ring[(y % 3) * pass.halfWidthPx + x] =
    (data[i] ?? 0) + (data[i + 1] ?? 0) + (data[i + widthPx] ?? 0) + (data[i + widthPx + 1] ?? 0);
}

/** Half-size row y, whose neighbours above and below are in the ring, into the half sums. */
function addHalfRow(pass: Pass, y: number, halfHeightPx: number): void {
  const { halfWidthPx, bounds, columns, rows } = pass;
  const at = (row: number) => (row % 3) * halfWidthPx;
  const offset = at(y);
  const add = pass.plane.data instanceof Uint8Array ? addHalfRun : addRun;
  const patchRow = columns * Math.floor(((y + 0.5) * rows) / halfHeightPx);
  for (let column = 0; column < columns; column += 1) {
    const from = Math.max(1, bounds[column] ?? 0);
    const end = Math.min(bounds[column + 1] ?? 0, halfWidthPx - 1);
    const run = { from: offset + from, end: offset + end, above: at(y - 1) - offset, below: at(y + 1) - offset };
    add(pass.ring, run, pass.half, patchRow + column);
  }
}

interface Sums {
  readonly count: number;
  readonly response: number;
  readonly responseSquared: number;
}

function varianceOf({ count, response, responseSquared }: Sums): number {
  return count === 0 ? 0 : Math.max(0, responseSquared / count - (response / count) ** 2);
}

function totalOf(sums: PatchSums): Sums {
  const total = (values: Float64Array) => values.reduce((sum, value) => sum + value, 0);
  return {
    count: total(sums.count),
    response: total(sums.response),
    responseSquared: total(sums.responseSquared),
  };
}

function sumsAt(sums: PatchSums, patch: number): Sums {
  return {
    count: sums.count[patch] ?? 0,
    response: sums.response[patch] ?? 0,
    responseSquared: sums.responseSquared[patch] ?? 0,
  };
}

function toGrid(pass: Pass, scale: number): PatchGrid {
  const patches = Array.from({ length: pass.columns * pass.rows }, (_, i) => i);
  const brightness = patches.map((i) => {
    const count = pass.half.count[i] ?? 0;
    return count === 0 ? 0 : ((pass.half.level[i] ?? 0) / count / HALF_PIXELS) * scale;
  });
  const relative = (variance: number, i: number) =>
    (variance * scale * scale) / Math.max(LEAST_BRIGHTNESS, brightness[i] ?? 0) ** 2;
  return {
    columns: pass.columns,
    rows: pass.rows,
    full: patches.map((i) => relative(varianceOf(sumsAt(pass.full, i)), i)),
    half: patches.map((i) => relative(varianceOf(sumsAt(pass.half, i)) / HALF_PIXELS ** 2, i)),
    brightness,
  };
}
