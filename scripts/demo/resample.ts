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
export function resample(scene: Raster, pose: Pose, size: FrameSize, into: Float32Array): void {
  if (isPlainShift(pose)) resampleShifted(scene, pose, size, into);
  else resampleMapped(scene, pose, size, into);
}

/** Weights as whole numbers of 1/4096: whole numbers are quicker, and the same on every machine. */
const WEIGHT_ONE = 4096;
const WHOLE_LANCZOS = Int32Array.from(LANCZOS, (weight) => Math.round(weight * WEIGHT_ONE));
/** What is kept of a level between the two passes: 1/64. */
const KEPT_BITS = 6;
const FROM_KEPT = 1 / (WEIGHT_ONE << KEPT_BITS);

/** Down first, row by row, then across: each row stays near the processor between the two. */
function resampleShifted(scene: Raster, pose: Pose, size: FrameSize, into: Float32Array): void {
  const left = pose.centreXPx - size.widthPx / 2;
  const top = pose.centreYPx - size.heightPx / 2;
  const startX = Math.floor(left);
  const startY = Math.floor(top);
  const across = Math.round((left - startX) * PHASES) * TAPS;
  const down = Math.round((top - startY) * PHASES) * TAPS;
  const row = new Int32Array((size.widthPx + TAPS - 1) * 3);
  for (let y = 0; y < size.heightPx; y++) {
    sumDown(scene, { startX: startX - 2, startY: startY + y - 2, weightsAt: down }, row);
    sumAcross(row, across, into, y * size.widthPx * 3);
  }
}

/** Fills `row` with levels times 64, each the weighted sum of six pixels below each other. */
function sumDown(
  { data, widthPx, heightPx }: Raster,
  from: { startX: number; startY: number; weightsAt: number },
  row: Int32Array,
): void {
  const [a, b, c, d, e, f] = weightsAt(from.weightsAt);
  const rowAt = (tap: number) => (clampIndex(from.startY + tap, heightPx) * widthPx + from.startX) * 3;
  const [i0, i1, i2, i3, i4, i5] = [rowAt(0), rowAt(1), rowAt(2), rowAt(3), rowAt(4), rowAt(5)];
  const first = Math.min(row.length, Math.max(0, -from.startX * 3));
  const end = Math.max(first, Math.min(row.length, (widthPx - from.startX) * 3));
  // Channels lie side by side and are summed alike, so one flat loop does all three.
  for (let i = first; i < end; i++) {
    row[i] =
      (Math.imul(a, data[i0 + i] as number) +
        Math.imul(b, data[i1 + i] as number) +
        Math.imul(c, data[i2 + i] as number) +
        Math.imul(d, data[i3 + i] as number) +
        Math.imul(e, data[i4 + i] as number) +
        Math.imul(f, data[i5 + i] as number)) >>
      KEPT_BITS;
  }
  for (let i = first - 1; i >= 0; i--) row[i] = row[i + 3] as number;
  for (let i = end; i < row.length; i++) row[i] = row[i - 3] as number;
}

function sumAcross(row: Int32Array, at: number, into: Float32Array, start: number): void {
  const [a, b, c, d, e, f] = weightsAt(at);
  const count = row.length - (TAPS - 1) * 3;
  for (let i = 0; i < count; i++) {
    into[start + i] =
      FROM_KEPT *
      (Math.imul(a, row[i] as number) +
        Math.imul(b, row[i + 3] as number) +
        Math.imul(c, row[i + 6] as number) +
        Math.imul(d, row[i + 9] as number) +
        Math.imul(e, row[i + 12] as number) +
        Math.imul(f, row[i + 15] as number));
  }
}

function weightsAt(at: number): [number, number, number, number, number, number] {
  const weight = (tap: number) => WHOLE_LANCZOS[at + tap] as number;
  return [weight(0), weight(1), weight(2), weight(3), weight(4), weight(5)];
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
