import { measureShift, prepareRegistration, type ImageShift, type PreparedImage } from "@/lib/analysis/shift";
import type { PairMeasure, RegistrationImage } from "@/lib/analysis/types";

/** What is loaded of one frame to register it. */
export interface RegistrationSource {
  readonly image: RegistrationImage;
  /** Upright full size. */
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Prepared images kept at once: about 0.6 MB each, so some 150 MB however many frames there are. */
const PREPARED_KEPT = 256;

interface Prepared {
  readonly source: RegistrationSource;
  readonly prepared: PreparedImage;
}

export interface PairMeasurerOptions {
  readonly load: (id: string) => Promise<RegistrationSource>;
  /** Structural similarity of two registration images laid over each other unshifted; -1 to 1. */
  readonly measureSsim: (a: RegistrationImage, b: RegistrationImage) => number;
  /** Gives way to other work of the process; called between pairs. */
  readonly giveWay?: () => Promise<void>;
  readonly preparedKept?: number;
}

/**
 * Measures pairs of frames on demand, as the sorting asks for them.
 * @param options - where the registration images come from
 * @returns a function of two ids; exactly antisymmetric: swapped ids give the opposite shift and equal figures
 *   (shifts are in pixels of the first frame, so of two bodies with unlike pixel counts each in its own)
 * Method and accuracy: see `measureShift`; prepared images are kept, the least recently used let go.
 * Edges: rejects with the error of `load` when that fails.
 */
export function createPairMeasurer(options: PairMeasurerOptions): (aId: string, bId: string) => Promise<PairMeasure> {
  const fetchPrepared = keepRecent(options.preparedKept ?? PREPARED_KEPT, async (id: string): Promise<Prepared> => {
    const source = await options.load(id);
    return { source, prepared: prepareRegistration(source.image) };
  });
  return async (aId, bId) => {
    const [a, b] = await Promise.all([fetchPrepared(aId), fetchPrepared(bId)]);
    await options.giveWay?.();
    // One order for both ways round: rounding then cannot make the two differ.
    const isSwapped = aId > bId;
    const [first, second] = isSwapped ? [b, a] : [a, b];
    const shift = measureShift(first.prepared, second.prepared);
    const ssim = options.measureSsim(first.source.image, second.source.image);
    return toPairMeasure(a.source, isSwapped ? -1 : 1, shift, ssim);
  };
}

function toPairMeasure(a: RegistrationSource, sign: number, shift: ImageShift, ssim: number): PairMeasure {
  return {
    // Adding 0 turns -0 into 0, so that both ways round read alike in JSON and in tests.
    xPx: (sign * shift.x * a.widthPx) / a.image.widthPx + 0,
    yPx: (sign * shift.y * a.heightPx) / a.image.heightPx + 0,
    ncc: shift.ncc,
    peakRatio: shift.peakRatio,
    contrast: shift.contrast,
    ssim,
  };
}

function keepRecent<Value>(kept: number, make: (id: string) => Promise<Value>): (id: string) => Promise<Value> {
  const recent = new Map<string, Promise<Value>>();
  return (id) => {
    const value = recent.get(id) ?? make(id);
    recent.delete(id);
    recent.set(id, value);
    // A failed load must not be remembered: the next call may succeed.
    value.catch(() => recent.delete(id));
    const oldest = recent.keys().next();
    if (recent.size > kept && !oldest.done) recent.delete(oldest.value);
    return value;
  };
}
