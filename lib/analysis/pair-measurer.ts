import { measureShift, prepareRegistration, type ImageShift, type PreparedImage } from "@/lib/analysis/shift";
import { turnImage } from "@/lib/analysis/turn-image";
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

/** Turns of the second frame that are tried: handheld frames of one tile lie up to 4 degrees to each other. Our own. */
const TURNS_DEGREES = [-3.2, -1.6, 1.6, 3.2];
/** Then half a step to either side of the best. */
const FINER_DEGREES = [-0.8, 0.8];
const RADIANS = Math.PI / 180;

/** "turned" looks for frames turned against each other as well, at seven times the cost. */
export type PairEffort = "plain" | "turned";

export type PairMeasurer = (aId: string, bId: string, effort?: PairEffort) => Promise<PairMeasure>;

/**
 * Measures pairs of frames on demand, as the sorting asks for them.
 * @param options - where the registration images come from
 * @returns a function of two ids; exactly antisymmetric: swapped ids give the opposite shift and equal figures
 *   (shifts are in pixels of the first frame, so of two bodies with unlike pixel counts each in its own)
 * Method and accuracy: see `measureShift`; prepared images are kept, the least recently used let go.
 * Edges: rejects with the error of `load` when that fails.
 */
export function createPairMeasurer(options: PairMeasurerOptions): PairMeasurer {
  const fetchPrepared = keepRecent(options.preparedKept ?? PREPARED_KEPT, async (id: string): Promise<Prepared> => {
    const source = await options.load(id);
    return { source, prepared: prepareRegistration(source.image) };
  });
  return async (aId, bId, effort = "plain") => {
    const [a, b] = await Promise.all([fetchPrepared(aId), fetchPrepared(bId)]);
    await options.giveWay?.();
    // One order for both ways round: rounding then cannot make the two differ.
    const isSwapped = aId > bId;
    const [first, second] = isSwapped ? [b, a] : [a, b];
    const plain = measureShift(first.prepared, second.prepared);
    const shift = effort === "turned" ? await measureTurned(first, second, plain, options.giveWay) : plain;
    const ssim = options.measureSsim(first.source.image, second.source.image);
    return toPairMeasure(a.source, isSwapped ? -1 : 1, shift, ssim);
  };
}

/** The best of the plain shift and those of the second frame turned; about the middle, so the shift is that of it. */
async function measureTurned(
  first: Prepared,
  second: Prepared,
  plain: ImageShift,
  giveWay: (() => Promise<void>) | undefined,
): Promise<ImageShift> {
  let best = { degrees: 0, shift: plain };
  const tryTurn = async (degrees: number): Promise<void> => {
    await giveWay?.();
    const turned = prepareRegistration(turnImage(second.source.image, degrees * RADIANS));
    const shift = measureShift(first.prepared, turned);
    if (scoreOf(shift, first) > scoreOf(best.shift, first)) best = { degrees, shift };
  };
  for (const degrees of TURNS_DEGREES) await tryTurn(degrees);
  const middle = best.degrees;
  for (const degrees of FINER_DEGREES) await tryTurn(middle + degrees);
  return best.shift;
}

/** As `measureShift` chooses among its peaks: a small overlap must correlate better. */
function scoreOf({ x, y, ncc }: ImageShift, { source }: Prepared): number {
  const { widthPx, heightPx } = source.image;
  const share = Math.max(0, 1 - Math.abs(x) / widthPx) * Math.max(0, 1 - Math.abs(y) / heightPx);
  return Math.atanh(Math.min(ncc, 0.999999)) * Math.sqrt(share);
}

function toPairMeasure(a: RegistrationSource, sign: number, shift: ImageShift, ssim: number): PairMeasure {
  // Adding 0 turns -0 into 0, so that both ways round read alike in JSON and in tests.
  const inFullSize = ({ x, y }: { readonly x: number; readonly y: number }) => ({
    xPx: (sign * x * a.widthPx) / a.image.widthPx + 0,
    yPx: (sign * y * a.heightPx) / a.image.heightPx + 0,
  });
  return {
    ...inFullSize(shift),
    ncc: shift.ncc,
    peakRatio: shift.peakRatio,
    contrast: shift.contrast,
    rivals: shift.rivals.map((rival) => ({ ...inFullSize(rival), ncc: rival.ncc })),
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
