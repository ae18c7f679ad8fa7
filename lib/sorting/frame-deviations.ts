import { medianAbsoluteDeviation, median, mode } from "./robust";
import type { SortFrame } from "./types";

/** How a frame differs from the rest of its stack, beyond sharpness. */
export interface Deviation {
  readonly kind: "exposure" | "focal-length" | "moved";
  /** Certain enough to set the frame aside without asking. */
  readonly isCertain: boolean;
  /** What was measured, in words. */
  readonly evidence: string;
}

/** Source of these limits: analysis.md, step 8. */
const EXPOSURE_EV = 0.15;
const BRIGHTNESS_EV = 0.22;
const FRAMING_SHARE = 0.006;
const FRAMING_MADS = 6;
/** Steps of brightness go with about the 2.2th power of light. Source: analysis.md, step 8. */
const GAMMA = 2.2;
/** Twice the limit leaves no doubt. Our own. */
const CERTAIN_FACTOR = 2;
/** Focal lengths written by a lens with few steps differ by rounding. Our own. */
const FOCAL_SHARE = 0.01;
/** With fewer frames there is no "most of them". */
const LEAST_FRAMES = 3;

/** log2(t S / N^2) up to a constant: one more is twice the light. Null where EXIF says too little. */
export function lightOf(frame: SortFrame): number | null {
  const { exposureSeconds, aperture, iso } = frame.metadata;
  if (exposureSeconds === null) return null;
  return Math.log2(exposureSeconds) - 2 * Math.log2(aperture ?? 1) + Math.log2(iso ?? 100);
}

/**
 * Frames that deviate from their stack in exposure, focal length or framing.
 * @param shifts - of each frame against one common frame of the stack, full-size px; null where not measured
 * @returns for each frame its gravest deviation or null, in the same order
 */
export function findDeviations(
  frames: readonly SortFrame[],
  shifts: readonly ({ xPx: number; yPx: number } | null)[],
): (Deviation | null)[] {
  if (frames.length < LEAST_FRAMES) return frames.map(() => null);
  const focal = focalDeviations(frames);
  const exposure = exposureDeviations(frames);
  const framing = framingDeviations(frames, shifts);
  return frames.map((_, index) => focal[index] ?? exposure[index] ?? framing[index] ?? null);
}

function focalDeviations(frames: readonly SortFrame[]): (Deviation | null)[] {
  const lengths = frames.flatMap((frame) => frame.metadata.focalLengthMm ?? []);
  const usual = mode(lengths);
  if (usual === undefined || lengths.filter((length) => length === usual).length * 2 <= lengths.length) {
    return frames.map(() => null);
  }
  return frames.map((frame) => {
    const length = frame.metadata.focalLengthMm;
    if (length === null || Math.abs(length / usual - 1) <= FOCAL_SHARE) return null;
    return { kind: "focal-length", isCertain: true, evidence: `taken at ${length} mm, the others at ${usual} mm` };
  });
}

function exposureDeviations(frames: readonly SortFrame[]): (Deviation | null)[] {
  const written = frames.map(lightOf);
  const known = written.flatMap((value) => value ?? []);
  const usual = mode(known.map((value) => Math.round(value * 100) / 100));
  const seen = frames.map((frame) => GAMMA * Math.log2(Math.max(1, frame.measurements.meanBrightness)));
  const middle = median(seen);
  return frames.map((_, index) => {
    const light = written[index] ?? null;
    if (light !== null && usual !== undefined && Math.abs(light - usual) > EXPOSURE_EV) {
      const ev = formatEv(light - usual);
      return { kind: "exposure", isCertain: true, evidence: `exposed ${ev} than the others, by its settings` };
    }
    const difference = (seen[index] ?? middle) - middle;
    if (Math.abs(difference) <= BRIGHTNESS_EV) return null;
    return {
      kind: "exposure",
      isCertain: Math.abs(difference) > BRIGHTNESS_EV * CERTAIN_FACTOR,
      evidence: `${formatEv(difference)} than the others, by its brightness`,
    };
  });
}

function formatEv(ev: number): string {
  return `${Math.abs(ev).toFixed(1)} EV ${ev > 0 ? "brighter" : "darker"}`;
}

function framingDeviations(
  frames: readonly SortFrame[],
  shifts: readonly ({ xPx: number; yPx: number } | null)[],
): (Deviation | null)[] {
  const known = shifts.flatMap((shift) => shift ?? []);
  if (known.length < LEAST_FRAMES) return frames.map(() => null);
  const centre = { x: median(known.map((shift) => shift.xPx)), y: median(known.map((shift) => shift.yPx)) };
  const distances = shifts.map((shift) => (shift ? Math.hypot(shift.xPx - centre.x, shift.yPx - centre.y) : null));
  const spread =
    median(distances.flatMap((distance) => distance ?? [])) +
    medianAbsoluteDeviation(distances.flatMap((distance) => distance ?? []));
  return frames.map((frame, index) => {
    const distance = distances[index] ?? null;
    const limit = Math.max(FRAMING_SHARE * frame.measurements.widthPx, FRAMING_MADS * spread);
    if (distance === null || distance <= limit) return null;
    const isCertain = distance > limit * CERTAIN_FACTOR;
    return { kind: "moved", isCertain, evidence: `framed ${Math.round(distance)} px away from the others` };
  });
}
