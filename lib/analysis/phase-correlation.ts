import FFT from "fft.js";

import { AnalysisError } from "@/lib/analysis/plane";
import type { Plane } from "@/lib/analysis/types";

/** Half of a real picture's two-dimensional spectrum: columns 0 to side / 2, each `side` complex values. */
export interface Spectrum {
  readonly sidePx: number;
  /** Column-major: index `2 * (column * side + row)`, real and imaginary part in turn. */
  readonly data: Float32Array;
}

interface Workspace {
  readonly fft: FFT;
  readonly lineIn: Float64Array;
  readonly lineOut: Float64Array;
}

const workspaces = new Map<number, Workspace>();

/** One transform and its scratch lines per size: nothing outside this file sees them between two calls. */
function workspaceFor(sidePx: number): Workspace {
  let workspace = workspaces.get(sidePx);
  if (!workspace) {
    workspace = {
      fft: new FFT(sidePx),
      lineIn: new Float64Array(2 * sidePx),
      lineOut: new Float64Array(2 * sidePx),
    };
    workspaces.set(sidePx, workspace);
  }
  return workspace;
}

/**
 * Fourier transform of a picture, padded with zeros at the right and below to a square.
 * @param plane - any range; mean about 0 and tapered to 0 at the border if false edges are not wanted
 * @param sidePx - a power of two, no less than either side
 * @throws AnalysisError when the plane does not fit
 * Method and accuracy: fft.js, rows then columns, kept in float32 (relative error about 1e-7).
 */
export function spectrumOf(plane: Plane, sidePx: number): Spectrum {
  if (plane.widthPx > sidePx || plane.heightPx > sidePx) {
    throw new AnalysisError(`picture must fit into ${sidePx} px, got ${plane.widthPx} x ${plane.heightPx}`);
  }
  const { fft, lineIn, lineOut } = workspaceFor(sidePx);
  const columns = sidePx / 2 + 1;
  const data = new Float32Array(2 * columns * sidePx);
  for (let y = 0; y < plane.heightPx; y += 1) {
    lineIn.fill(0, 0, sidePx);
    for (let x = 0; x < plane.widthPx; x += 1) lineIn[x] = plane.data[y * plane.widthPx + x] ?? 0;
    fft.realTransform(lineOut, lineIn);
    for (let u = 0; u < columns; u += 1) {
      data[2 * (u * sidePx + y)] = lineOut[2 * u] ?? 0;
      data[2 * (u * sidePx + y) + 1] = lineOut[2 * u + 1] ?? 0;
    }
  }
  for (let u = 0; u < columns; u += 1) {
    const column = data.subarray(2 * u * sidePx, 2 * (u + 1) * sidePx);
    lineIn.set(column);
    fft.transform(lineOut, lineIn);
    column.set(lineOut);
  }
  return { sidePx, data };
}

/**
 * Phase correlation surface: how well b fits when its top left corner is laid on (x, y) of a, cyclically.
 *
 * surface = F⁻¹[ Fa conj(Fb) / |Fa conj(Fb)|^exponent ]
 * @param exponent - 1 is phase correlation proper (height 1 for a pure shift), 0 plain cross-correlation
 * @returns `side * side` values, row-major; index `((y + side) % side) * side + (x + side) % side`
 * @throws AnalysisError when the spectra differ in size
 * Method and accuracy: two real rows per complex transform; float64 lines, float32 surface.
 * Edges: frequencies that are absent in either picture count nothing; two empty pictures give 0 everywhere.
 * Source: Kuglin and Hines, Proc. IEEE Int. Conf. Cybernetics and Society 1975, 163-165; weakened by an exponent
 * under 1 because whitening in full raises the noise of frequencies that hardly occur (analysis.md step 3).
 */
export function phaseCorrelation(a: Spectrum, b: Spectrum, exponent: number): Float32Array {
  if (a.sidePx !== b.sidePx) throw new AnalysisError(`spectra must be of one size, got ${a.sidePx} and ${b.sidePx}`);
  const crossed = crossPower(a, b, exponent);
  invertColumns(crossed, a.sidePx);
  return invertRows(crossed, a.sidePx);
}

function crossPower(a: Spectrum, b: Spectrum, exponent: number): Float32Array {
  const result = new Float32Array(a.data.length);
  const power = -exponent / 2;
  for (let i = 0; i < result.length; i += 2) {
    const aRe = a.data[i] ?? 0;
    const aIm = a.data[i + 1] ?? 0;
    const bRe = b.data[i] ?? 0;
    const bIm = b.data[i + 1] ?? 0;
    const re = aRe * bRe + aIm * bIm;
    const im = aIm * bRe - aRe * bIm;
    const squared = re * re + im * im;
    if (squared === 0) continue;
    const size = Math.sqrt(squared);
    // Square roots alone for the exponent in use: the power function would take longer than the transforms.
    const weight = exponent === 0.75 ? 1 / Math.sqrt(size * Math.sqrt(size)) : squared ** power;
    result[i] = re * weight;
    result[i + 1] = im * weight;
  }
  return result;
}

function invertColumns(data: Float32Array, sidePx: number): void {
  const { fft, lineIn, lineOut } = workspaceFor(sidePx);
  for (let u = 0; u <= sidePx / 2; u += 1) {
    const column = data.subarray(2 * u * sidePx, 2 * (u + 1) * sidePx);
    lineIn.set(column);
    fft.inverseTransform(lineOut, lineIn);
    column.set(lineOut);
  }
}

function invertRows(data: Float32Array, sidePx: number): Float32Array {
  const { fft, lineIn, lineOut } = workspaceFor(sidePx);
  const surface = new Float32Array(sidePx * sidePx);
  const half = sidePx / 2;
  for (let y = 0; y < sidePx; y += 2) {
    for (let u = 0; u <= half; u += 1) {
      const i = 2 * (u * sidePx + y);
      const firstRe = data[i] ?? 0;
      const firstIm = data[i + 1] ?? 0;
      const nextRe = data[i + 2] ?? 0;
      const nextIm = data[i + 3] ?? 0;
      // Row y as the real, row y + 1 as the imaginary part; the other half follows from both rows being real.
      lineIn[2 * u] = firstRe - nextIm;
      lineIn[2 * u + 1] = firstIm + nextRe;
      if (u === 0 || u === half) continue;
      lineIn[2 * (sidePx - u)] = firstRe + nextIm;
      lineIn[2 * (sidePx - u) + 1] = nextRe - firstIm;
    }
    fft.inverseTransform(lineOut, lineIn);
    for (let x = 0; x < sidePx; x += 1) {
      surface[y * sidePx + x] = lineOut[2 * x] ?? 0;
      surface[(y + 1) * sidePx + x] = lineOut[2 * x + 1] ?? 0;
    }
  }
  return surface;
}
