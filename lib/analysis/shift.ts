import { areaAverage, fitLongSide, type FloatPlane } from "@/lib/analysis/area-average";
import { highPass } from "@/lib/analysis/high-pass";
import { correlateOverlap, type OverlapCorrelation } from "@/lib/analysis/overlap-correlation";
import { phaseCorrelation, spectrumOf, type Spectrum } from "@/lib/analysis/phase-correlation";
import { parabolaOffset } from "@/lib/analysis/sub-pixel";
import { findPeaks, type SurfacePeak } from "@/lib/analysis/surface-peaks";
import { TEXTURE_LEVEL } from "@/lib/analysis/texture";
import { REGISTRATION_LEVELS } from "@/lib/analysis/registration-image";
import type { RegistrationImage } from "@/lib/analysis/types";

// All from analysis.md step 3, measured there on 93 simulated shoots.
const COARSE_LONG_SIDE_PX = 128;
const SPECTRUM_SIDE_PX = 2 * COARSE_LONG_SIDE_PX;
const BLUR_SHARE_OF_SIDE = 0.03;
const CLIP_DEVIATIONS = 2.5;
const WHITENING_EXPONENT = 0.75;
const LEAST_OVERLAP = 0.06;
const PEAKS_LOOKED_AT = 8;
const PEAKS_VERIFIED = 3;
/** Under this ratio of the best two all peaks are verified. Ours, from generated shoots of house fronts. */
const AMBIGUOUS_PEAK_RATIO = 1.3;
/** A rival scores at least this share of the best. Ours. */
const RIVAL_SHARE = 0.6;
/** Neighbouring pixels of a small picture are not independent: about one in twelve counts. */
const PIXELS_PER_SAMPLE = 12;
/** Share of each side over which the border is faded out before the transform; "short" in analysis.md, ours. */
const TAPER_SHARE = 0.06;
/** A coarse pixel is two fine ones and its peak may be one off, so the climb at 256 px seldom goes further than this. */
const LONGEST_CLIMB_PX = 6;
/** Two candidates that climb to within this distance of each other are one peak. */
const SAME_PEAK_PX = 4;
/** Nothing beside the best peak: as clear as a ratio can usefully say. */
const HIGHEST_PEAK_RATIO = 100;
/** atanh(1) is infinite; a picture against itself must stay comparable. */
const HIGHEST_NCC = 0.999999;

/** A registration image made ready to be measured against others: about 0.5 MB, so keep a bounded number of them. */
export interface PreparedImage {
  /** High-passed, clipped, at most 256 px, in levels 0 to 255. */
  readonly fine: FloatPlane;
  /** The same at most 128 px. */
  readonly coarse: FloatPlane;
  /** Of the coarse one, tapered and padded to 256 px. */
  readonly spectrum: Spectrum;
}

/** Another shift at which two pictures match nearly as well: where patterns repeat, it may be the true one. */
export interface ShiftRival {
  readonly x: number;
  readonly y: number;
  readonly ncc: number;
}

/** How two prepared images lie to each other. */
export interface ImageShift {
  /** Where b's top left corner lies in a, in pixels of the registration image, about 0.1 px accurate. */
  readonly x: number;
  readonly y: number;
  readonly ncc: number;
  readonly peakRatio: number;
  readonly contrast: number;
  /** The best first; none where the best shift stands alone. */
  readonly rivals: readonly ShiftRival[];
}

/**
 * Makes a registration image ready for `measureShift`: high-pass, clip, reduce, transform. About 4 ms.
 * @param image - 16-bit levels, at most 256 px on its long side
 * @throws AnalysisError when the image is malformed
 * Edges: a constant image gives zeros, which match nothing.
 */
export function prepareRegistration(image: RegistrationImage): PreparedImage {
  // Plain loops here and below: a mapping function for every pixel takes several times as long.
  const levels = new Float32Array(image.data);
  for (let i = 0; i < levels.length; i += 1) levels[i] = ((levels[i] ?? 0) * 255) / REGISTRATION_LEVELS;
  const plane: FloatPlane = { data: levels, widthPx: image.widthPx, heightPx: image.heightPx };
  const small = fitLongSide(image.widthPx, image.heightPx, COARSE_LONG_SIDE_PX);
  const coarse = detailOf(areaAverage(plane, small.widthPx, small.heightPx));
  return { fine: detailOf(plane), coarse, spectrum: spectrumOf(taper(coarse), SPECTRUM_SIDE_PX) };
}

function detailOf(plane: FloatPlane): FloatPlane {
  const radiusPx = Math.max(1, Math.round(BLUR_SHARE_OF_SIDE * Math.max(plane.widthPx, plane.heightPx)));
  const detail = highPass(plane, radiusPx);
  const { data } = detail;
  let squared = 0;
  for (const value of data) squared += value * value;
  // A few bright lamps or a horizon would otherwise decide alone.
  const limit = CLIP_DEVIATIONS * Math.sqrt(squared / data.length);
  for (let i = 0; i < data.length; i += 1) data[i] = Math.max(-limit, Math.min(limit, data[i] ?? 0));
  return detail;
}

function taper(plane: FloatPlane): FloatPlane {
  const { widthPx, heightPx } = plane;
  const across = taperWeights(widthPx);
  const down = taperWeights(heightPx);
  const data = new Float32Array(plane.data);
  for (let y = 0; y < heightPx; y += 1) {
    const row = down[y] ?? 0;
    for (let x = 0; x < widthPx; x += 1) {
      const i = y * widthPx + x;
      data[i] = (data[i] ?? 0) * row * (across[x] ?? 0);
    }
  }
  return { data, widthPx, heightPx };
}

function taperWeights(lengthPx: number): Float64Array {
  const rampPx = Math.max(1, TAPER_SHARE * lengthPx);
  return Float64Array.from({ length: lengthPx }, (_, i) => {
    const fromBorder = Math.min(i, lengthPx - 1 - i) + 0.5;
    return fromBorder >= rampPx ? 1 : 0.5 - 0.5 * Math.cos((Math.PI * fromBorder) / rampPx);
  });
}

interface Candidate {
  readonly peak: SurfacePeak;
  readonly score: number;
}

/**
 * Where one frame lies in another, by phase correlation verified with normalised cross-correlation.
 * @param a - the frame that stays
 * @param b - the frame that is laid on it; b's camera pointed further right gives x above 0
 * @returns shift in registration pixels, ncc -1 to 1, peakRatio 1 or more, contrast 0 or more
 * Method and accuracy: 8 highest peaks with 6 % overlap or more at 128 px, the best 3 by atanh(NCC) sqrt(samples / 12)
 * verified at 256 px, sub-pixel by a parabola through the NCC. Swapping a and b turns the sign to within rounding.
 * Edges: no texture in either gives shift 0, ncc 0, contrast 0, peakRatio 1.
 * Source: Kuglin and Hines 1975 (see `phaseCorrelation`); choice of the peak: analysis.md step 3.
 */
export function measureShift(a: PreparedImage, b: PreparedImage): ImageShift {
  const surface = phaseCorrelation(a.spectrum, b.spectrum, WHITENING_EXPONENT);
  const peaks = findPeaks(surface, SPECTRUM_SIDE_PX, {
    a: a.coarse,
    b: b.coarse,
    leastOverlap: LEAST_OVERLAP,
    count: PEAKS_LOOKED_AT,
  });
  const correlate = rememberCorrelations(a.fine, b.fine);
  const scale = a.fine.widthPx / a.coarse.widthPx;
  const candidates = peaks
    .map((peak): Candidate => ({ peak, score: matchScore(correlateOverlap(a.coarse, b.coarse, peak.x, peak.y)) }))
    .sort((first, second) => second.score - first.score);
  const verify = ({ peak }: Candidate) => climb(correlate, Math.round(peak.x * scale), Math.round(peak.y * scale));
  let ranked = candidates.slice(0, PEAKS_VERIFIED).map(verify);
  let best = bestOf(ranked);
  if (best === null) return { x: 0, y: 0, ncc: 0, peakRatio: 1, contrast: 0, rivals: [] };
  const contrast = Math.min(best.correlation.deviationA, best.correlation.deviationB) / TEXTURE_LEVEL;
  // Rows of windows match at many shifts alike: then the true one may be further down the list.
  if (contrast >= 1 && peakRatio(best, ranked) < AMBIGUOUS_PEAK_RATIO) {
    ranked = [...ranked, ...candidates.slice(PEAKS_VERIFIED).map(verify)];
    best = bestOf(ranked) ?? best;
  }
  const { x, y, correlation } = best;
  return {
    ...refine(correlate, x, y),
    ncc: correlation.ncc,
    peakRatio: peakRatio(best, ranked),
    contrast: Math.min(correlation.deviationA, correlation.deviationB) / TEXTURE_LEVEL,
    rivals: findRivals(best, ranked).map((rival) => {
      return { ...refine(correlate, rival.x, rival.y), ncc: rival.correlation.ncc };
    }),
  };
}

function bestOf(ranked: readonly Climbed[]): Climbed | null {
  return ranked.reduce<Climbed | null>(
    (found, next) => (found === null || next.score > found.score ? next : found),
    null,
  );
}

/** Other shifts that match nearly as well, the best first. */
function findRivals(best: Climbed, all: readonly Climbed[]): Climbed[] {
  const rivals: Climbed[] = [];
  for (const next of [...all].sort((p, q) => q.score - p.score)) {
    if (next.score < best.score * RIVAL_SHARE) break;
    if ([best, ...rivals].every((other) => isElsewhere(next, other))) rivals.push(next);
  }
  return rivals;
}

function isElsewhere(a: Climbed, b: Climbed): boolean {
  return Math.max(Math.abs(a.x - b.x), Math.abs(a.y - b.y)) > SAME_PEAK_PX;
}

function matchScore({ ncc, samples }: OverlapCorrelation): number {
  return Math.atanh(Math.max(-HIGHEST_NCC, Math.min(HIGHEST_NCC, ncc))) * Math.sqrt(samples / PIXELS_PER_SAMPLE);
}

interface Climbed {
  readonly x: number;
  readonly y: number;
  readonly score: number;
  readonly correlation: OverlapCorrelation;
}

type Correlate = (x: number, y: number) => OverlapCorrelation;

/** Climbing looks at most places more than once; each is worth 0.1 ms. */
function rememberCorrelations(a: FloatPlane, b: FloatPlane): Correlate {
  const known = new Map<string, OverlapCorrelation>();
  return (x, y) => {
    const key = `${x},${y}`;
    const correlation = known.get(key) ?? correlateOverlap(a, b, x, y);
    known.set(key, correlation);
    return correlation;
  };
}

/** From a coarse peak to the nearest maximum of the NCC at full registration size. */
function climb(correlate: Correlate, fromX: number, fromY: number): Climbed {
  const at = (x: number, y: number): Climbed => {
    const correlation = correlate(x, y);
    return { x, y, correlation, score: matchScore(correlation) };
  };
  let best = at(fromX, fromY);
  for (let step = 0; step < LONGEST_CLIMB_PX; step += 1) {
    const before = best;
    for (const [dx, dy] of NEIGHBOURS) {
      const next = at(before.x + dx, before.y + dy);
      if (next.score > best.score) best = next;
    }
    if (best === before) break;
  }
  return best;
}

const NEIGHBOURS = [
  [-1, 0],
  [1, 0],
  [0, -1],
  [0, 1],
] as const;

function refine(correlate: Correlate, x: number, y: number): { x: number; y: number } {
  const at = (dx: number, dy: number) => correlate(x + dx, y + dy).ncc;
  return { x: x + parabolaOffset(at(-1, 0), at(0, 0), at(1, 0)), y: y + parabolaOffset(at(0, -1), at(0, 0), at(0, 1)) };
}

/** Best score over the second best of those that lie elsewhere. */
function peakRatio(best: Climbed, all: readonly Climbed[]): number {
  const others = all.filter((other) => isElsewhere(other, best));
  const second = Math.max(0, ...others.map(({ score }) => score));
  if (second === 0) return best.score > 0 ? HIGHEST_PEAK_RATIO : 1;
  return Math.max(1, Math.min(HIGHEST_PEAK_RATIO, best.score / second));
}
