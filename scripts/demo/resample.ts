import { type FrameSize, frameToScene, isPlainShift, type Pose } from "./pose";
import type { Raster } from "./raster";

const PHASES = 128;
const TAPS = 6;
/** Mapping is worked out exactly at every so many px of a row and joined by straight lines between. */
const MAP_STEP_PX = 16;

/**
 * Six-tap Lanczos weights for 128 positions between two pixels, each set adding to 1.
 * A shorter kernel would make sharpness depend on the fraction of a pixel by which a frame is shifted.
 * Source: Lanczos-3 window, Duchon (1979), J. Appl. Meteorol. 18, 1016-1022.
 */
const LANCZOS = (() => {
  const sinc = (t: number) => (t === 0 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t));
  const table = new Float32Array((PHASES + 1) * TAPS);
  for (let phase = 0; phase <= PHASES; phase++) {
    const weights = Array.from({ length: TAPS }, (_, tap) => {
      const t = tap - 2 - phase / PHASES;
      return Math.abs(t) >= 3 ? 0 : sinc(t) * sinc(t / 3);
    });
    const sum = weights.reduce((total, weight) => total + weight, 0);
    weights.forEach((weight, tap) => (table[phase * TAPS + tap] = weight / sum));
  }
  return table;
})();

const clampIndex = (index: number, count: number) => (index < 0 ? 0 : index >= count ? count - 1 : index);

/** Fills `into` (red, green, blue interleaved) with what the camera sees; the scene's edge is repeated outside it. */
export function resample(scene: Raster, pose: Pose, size: FrameSize, into: Float32Array, scratch: Float32Array): void {
  if (isPlainShift(pose)) resampleShifted(scene, pose, size, { into, scratch });
  else resampleMapped(scene, pose, size, into);
}

/** Rows of scratch that `resample` needs beyond the frame's own. */
export const EXTRA_SCRATCH_ROWS = TAPS;

function resampleShifted(
  scene: Raster,
  pose: Pose,
  size: FrameSize,
  buffers: { into: Float32Array; scratch: Float32Array },
): void {
  const { into, scratch } = buffers;
  const left = pose.centreXPx - size.widthPx / 2;
  const top = pose.centreYPx - size.heightPx / 2;
  const startX = Math.floor(left);
  const startY = Math.floor(top);
  const acrossAt = Math.round((left - startX) * PHASES) * TAPS;
  const downAt = Math.round((top - startY) * PHASES) * TAPS;
  const rowLength = size.widthPx * 3;
  for (let row = 0; row < size.heightPx + TAPS - 1; row++) {
    const sceneRow = clampIndex(startY - 2 + row, scene.heightPx);
    shiftRow(
      scene,
      { sceneRow, startX, weightsAt: acrossAt },
      scratch.subarray(row * rowLength, (row + 1) * rowLength),
    );
  }
  const [a, b, c, d, e, f] = weightsAt(downAt);
  for (let y = 0; y < size.heightPx; y++) {
    const base = y * rowLength;
    for (let i = base; i < base + rowLength; i++) {
      into[i] =
        a * (scratch[i] as number) +
        b * (scratch[i + rowLength] as number) +
        c * (scratch[i + 2 * rowLength] as number) +
        d * (scratch[i + 3 * rowLength] as number) +
        e * (scratch[i + 4 * rowLength] as number) +
        f * (scratch[i + 5 * rowLength] as number);
    }
  }
}

function weightsAt(at: number): [number, number, number, number, number, number] {
  const weight = (tap: number) => LANCZOS[at + tap] as number;
  return [weight(0), weight(1), weight(2), weight(3), weight(4), weight(5)];
}

function shiftRow(
  scene: Raster,
  from: { sceneRow: number; startX: number; weightsAt: number },
  into: Float32Array,
): void {
  const { data, widthPx } = scene;
  const [a, b, c, d, e, f] = weightsAt(from.weightsAt);
  const rowStart = from.sceneRow * widthPx * 3;
  const count = into.length / 3;
  const firstInside = Math.min(count, Math.max(0, 2 - from.startX));
  const afterInside = Math.max(firstInside, Math.min(count, widthPx - TAPS + 3 - from.startX));
  const offset = rowStart + (from.startX - 2) * 3;
  // Channels lie side by side and are shifted alike, so one flat loop does all three.
  for (let i = firstInside * 3; i < afterInside * 3; i++) {
    const j = offset + i;
    into[i] =
      a * (data[j] as number) +
      b * (data[j + 3] as number) +
      c * (data[j + 6] as number) +
      d * (data[j + 9] as number) +
      e * (data[j + 12] as number) +
      f * (data[j + 15] as number);
  }
  const weights = [a, b, c, d, e, f];
  for (let x = 0; x < count; x++) {
    if (x === firstInside) x = afterInside;
    for (let channel = 0; channel < 3 && x < count; channel++) {
      into[x * 3 + channel] = weights.reduce((sum, weight, tap) => {
        const column = clampIndex(from.startX - 2 + x + tap, widthPx);
        return sum + weight * (data[rowStart + column * 3 + channel] as number);
      }, 0);
    }
  }
}

function resampleMapped(scene: Raster, pose: Pose, size: FrameSize, into: Float32Array): void {
  const { widthPx, heightPx } = size;
  const knots = Math.ceil(widthPx / MAP_STEP_PX) + 1;
  const knotX = new Float64Array(knots);
  const knotY = new Float64Array(knots);
  for (let y = 0; y < heightPx; y++) {
    for (let knot = 0; knot < knots; knot++) {
      // Pixel centres: pixel x covers x to x + 1 in frame coordinates, and so in the scene.
      const at = frameToScene(pose, size, { xPx: knot * MAP_STEP_PX + 0.5, yPx: y + 0.5 });
      knotX[knot] = at.xPx - 0.5;
      knotY[knot] = at.yPx - 0.5;
    }
    for (let x = 0; x < widthPx; x++) {
      const knot = Math.floor(x / MAP_STEP_PX);
      const part = x / MAP_STEP_PX - knot;
      const x0 = knotX[knot] as number;
      const y0 = knotY[knot] as number;
      const sceneX = x0 + part * ((knotX[knot + 1] as number) - x0);
      const sceneY = y0 + part * ((knotY[knot + 1] as number) - y0);
      samplePixel(scene, sceneX, sceneY, into, (y * widthPx + x) * 3);
    }
  }
}

function samplePixel(scene: Raster, x: number, y: number, into: Float32Array, at: number): void {
  const { data, widthPx, heightPx } = scene;
  const startX = Math.floor(x);
  const startY = Math.floor(y);
  const across = Math.round((x - startX) * PHASES) * TAPS;
  const down = Math.round((y - startY) * PHASES) * TAPS;
  if (startX < 2 || startX + 3 >= widthPx || startY < 2 || startY + 3 >= heightPx) {
    sampleAtEdge(scene, { startX, startY, across, down }, into, at);
    return;
  }
  const a = LANCZOS[across] as number;
  const b = LANCZOS[across + 1] as number;
  const c = LANCZOS[across + 2] as number;
  const d = LANCZOS[across + 3] as number;
  const e = LANCZOS[across + 4] as number;
  const f = LANCZOS[across + 5] as number;
  let red = 0;
  let green = 0;
  let blue = 0;
  let i = ((startY - 2) * widthPx + startX - 2) * 3;
  // Written out tap by tap: a loop over the taps is three times slower, and this is where a shoot's time goes.
  for (let row = 0; row < TAPS; row++) {
    const weight = LANCZOS[down + row] as number;
    red +=
      weight *
      (a * (data[i] as number) +
        b * (data[i + 3] as number) +
        c * (data[i + 6] as number) +
        d * (data[i + 9] as number) +
        e * (data[i + 12] as number) +
        f * (data[i + 15] as number));
    green +=
      weight *
      (a * (data[i + 1] as number) +
        b * (data[i + 4] as number) +
        c * (data[i + 7] as number) +
        d * (data[i + 10] as number) +
        e * (data[i + 13] as number) +
        f * (data[i + 16] as number));
    blue +=
      weight *
      (a * (data[i + 2] as number) +
        b * (data[i + 5] as number) +
        c * (data[i + 8] as number) +
        d * (data[i + 11] as number) +
        e * (data[i + 14] as number) +
        f * (data[i + 17] as number));
    i += widthPx * 3;
  }
  into[at] = red;
  into[at + 1] = green;
  into[at + 2] = blue;
}

function sampleAtEdge(
  scene: Raster,
  from: { startX: number; startY: number; across: number; down: number },
  into: Float32Array,
  at: number,
): void {
  const { data, widthPx, heightPx } = scene;
  into.fill(0, at, at + 3);
  for (let row = 0; row < TAPS; row++) {
    const rowStart = clampIndex(from.startY - 2 + row, heightPx) * widthPx;
    for (let tap = 0; tap < TAPS; tap++) {
      const i = (rowStart + clampIndex(from.startX - 2 + tap, widthPx)) * 3;
      const weight = (LANCZOS[from.down + row] as number) * (LANCZOS[from.across + tap] as number);
      for (let channel = 0; channel < 3; channel++) {
        into[at + channel] = (into[at + channel] as number) + weight * (data[i + channel] as number);
      }
    }
  }
}
