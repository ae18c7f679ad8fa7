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

function addShifted(
  from: Float32Array,
  into: Float32Array,
  size: FrameSize,
  shift: { xPx: number; yPx: number; weight: number },
): void {
  const { widthPx, heightPx } = size;
  const wholeX = Math.floor(shift.xPx);
  const wholeY = Math.floor(shift.yPx);
  const partX = shift.xPx - wholeX;
  const partY = shift.yPx - wholeY;
  for (let y = 0; y < heightPx; y++) {
    const above = Math.min(heightPx - 1, Math.max(0, y + wholeY)) * widthPx;
    const below = Math.min(heightPx - 1, Math.max(0, y + wholeY + 1)) * widthPx;
    for (let x = 0; x < widthPx; x++) {
      const left = Math.min(widthPx - 1, Math.max(0, x + wholeX));
      const right = Math.min(widthPx - 1, Math.max(0, x + wholeX + 1));
      const at = (y * widthPx + x) * 3;
      for (let channel = 0; channel < 3; channel++) {
        const upper =
          (1 - partX) * (from[(above + left) * 3 + channel] as number) +
          partX * (from[(above + right) * 3 + channel] as number);
        const lower =
          (1 - partX) * (from[(below + left) * 3 + channel] as number) +
          partX * (from[(below + right) * 3 + channel] as number);
        into[at + channel] = (into[at + channel] as number) + shift.weight * ((1 - partY) * upper + partY * lower);
      }
    }
  }
}
