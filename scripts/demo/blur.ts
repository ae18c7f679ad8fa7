import type { FrameSize } from "./pose";

/** Half of a Gaussian's weights: the middle first; reaches three deviations; adds to 1 with both sides. */
function gaussianWeights(sigmaPx: number): Float32Array {
  const reach = Math.max(1, Math.ceil(3 * sigmaPx));
  const weights = Float32Array.from({ length: reach + 1 }, (_, i) => Math.exp((-i * i) / (2 * sigmaPx * sigmaPx)));
  const sum = weights.reduce((total, weight, i) => total + (i === 0 ? weight : 2 * weight), 0);
  return weights.map((weight) => weight / sum);
}

/**
 * Softens interleaved pixels in place as a lens out of focus does.
 * @param sigmaPx - deviation of the Gaussian, px, over 0
 */
export function gaussianBlur(data: Float32Array, size: FrameSize, sigmaPx: number, scratch: Float32Array): void {
  const weights = gaussianWeights(sigmaPx);
  const rowLength = size.widthPx * 3;
  for (let y = 0; y < size.heightPx; y++) {
    blurLine(data, scratch, { start: y * rowLength, step: 3, count: size.widthPx, channels: 3 }, weights);
  }
  blurDown(scratch, data, size, weights);
}

interface Line {
  readonly start: number;
  readonly step: number;
  readonly count: number;
  readonly channels: number;
}

function blurLine(from: Float32Array, into: Float32Array, line: Line, weights: Float32Array): void {
  const { start, step, count, channels } = line;
  const reach = weights.length - 1;
  for (let i = 0; i < count; i++) {
    const isInside = i >= reach && i + reach < count;
    for (let channel = 0; channel < channels; channel++) {
      const at = start + i * step + channel;
      let sum = (weights[0] as number) * (from[at] as number);
      for (let k = 1; k <= reach; k++) {
        const before = isInside ? at - k * step : start + Math.max(0, i - k) * step + channel;
        const after = isInside ? at + k * step : start + Math.min(count - 1, i + k) * step + channel;
        sum += (weights[k] as number) * ((from[before] as number) + (from[after] as number));
      }
      into[at] = sum;
    }
  }
}

/** Row by row, so that memory is read in order. */
function blurDown(from: Float32Array, into: Float32Array, size: FrameSize, weights: Float32Array): void {
  const rowLength = size.widthPx * 3;
  const last = size.heightPx - 1;
  for (let y = 0; y <= last; y++) {
    const row = y * rowLength;
    for (let i = 0; i < rowLength; i++) into[row + i] = (weights[0] as number) * (from[row + i] as number);
    for (let k = 1; k < weights.length; k++) {
      const above = Math.max(0, y - k) * rowLength;
      const below = Math.min(last, y + k) * rowLength;
      const weight = weights[k] as number;
      for (let i = 0; i < rowLength; i++) {
        into[row + i] =
          (into[row + i] as number) + weight * ((from[above + i] as number) + (from[below + i] as number));
      }
    }
  }
}

/**
 * Smears interleaved pixels in place along a straight line, as a shake during the exposure does.
 * @param motion.lengthPx - length of the line; its deviation is lengthPx / sqrt(12)
 */
export function motionBlur(
  data: Float32Array,
  size: FrameSize,
  motion: { lengthPx: number; angleRad: number },
  scratch: Float32Array,
): void {
  const steps = Math.max(2, Math.ceil(motion.lengthPx * 2)) + 1;
  scratch.fill(0, 0, data.length);
  for (let step = 0; step < steps; step++) {
    const along = (step / (steps - 1) - 0.5) * motion.lengthPx;
    addShifted(data, scratch, size, {
      xPx: along * Math.cos(motion.angleRad),
      yPx: along * Math.sin(motion.angleRad),
      weight: 1 / steps,
    });
  }
  data.set(scratch.subarray(0, data.length));
}

interface Shift {
  readonly xPx: number;
  readonly yPx: number;
  readonly weight: number;
}

function addShifted(from: Float32Array, into: Float32Array, size: FrameSize, shift: Shift): void {
  const { widthPx, heightPx } = size;
  const wholeX = Math.floor(shift.xPx);
  const wholeY = Math.floor(shift.yPx);
  const partX = shift.xPx - wholeX;
  const partY = shift.yPx - wholeY;
  const firstX = Math.min(widthPx, Math.max(0, -wholeX));
  const endX = Math.max(firstX, Math.min(widthPx, widthPx - 1 - wholeX));
  const weights: Corners = [
    shift.weight * (1 - partY) * (1 - partX),
    shift.weight * (1 - partY) * partX,
    shift.weight * partY * (1 - partX),
    shift.weight * partY * partX,
  ];
  for (let y = 0; y < heightPx; y++) {
    const above = Math.min(heightPx - 1, Math.max(0, y + wholeY)) * widthPx;
    const below = Math.min(heightPx - 1, Math.max(0, y + wholeY + 1)) * widthPx;
    const row = { at: y * widthPx, above, below, wholeX };
    addInside(from, into, { ...row, from: firstX, to: endX }, weights);
    for (let x = 0; x < firstX; x++) addAtEdge(from, into, { ...row, x, widthPx }, weights);
    for (let x = endX; x < widthPx; x++) addAtEdge(from, into, { ...row, x, widthPx }, weights);
  }
}

/** Weights of the upper left, upper right, lower left and lower right pixel. */
type Corners = readonly [number, number, number, number];

interface ShiftedRow {
  /** Index of the row's first pixel, and of the two rows it is taken from. */
  readonly at: number;
  readonly above: number;
  readonly below: number;
  readonly wholeX: number;
}

/** Channels lie side by side and are shifted alike, so one flat loop does all three. */
function addInside(
  from: Float32Array,
  into: Float32Array,
  row: ShiftedRow & { readonly from: number; readonly to: number },
  [upperLeft, upperRight, lowerLeft, lowerRight]: Corners,
): void {
  const up = (row.above + row.wholeX - row.at) * 3;
  const down = (row.below + row.wholeX - row.at) * 3;
  const end = (row.at + row.to) * 3;
  for (let i = (row.at + row.from) * 3; i < end; i++) {
    into[i] =
      (into[i] as number) +
      upperLeft * (from[i + up] as number) +
      upperRight * (from[i + up + 3] as number) +
      lowerLeft * (from[i + down] as number) +
      lowerRight * (from[i + down + 3] as number);
  }
}

/** Where a neighbour would lie outside, the edge is repeated. */
function addAtEdge(
  from: Float32Array,
  into: Float32Array,
  row: ShiftedRow & { readonly x: number; readonly widthPx: number },
  [upperLeft, upperRight, lowerLeft, lowerRight]: Corners,
): void {
  const left = Math.min(row.widthPx - 1, Math.max(0, row.x + row.wholeX));
  const right = Math.min(row.widthPx - 1, Math.max(0, row.x + row.wholeX + 1));
  for (let channel = 0; channel < 3; channel++) {
    const level = (pixel: number) => from[pixel * 3 + channel] as number;
    const at = (row.at + row.x) * 3 + channel;
    into[at] =
      (into[at] as number) +
      upperLeft * level(row.above + left) +
      upperRight * level(row.above + right) +
      lowerLeft * level(row.below + left) +
      lowerRight * level(row.below + right);
  }
}
