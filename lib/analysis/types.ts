/** One channel of a picture as a plain array, row-major, index `y * widthPx + x`. */
export interface Plane {
  readonly data: Uint8Array | Uint8ClampedArray | Uint16Array | Float32Array | Float64Array;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Values measured on a regular grid of patches over the upright picture, row-major. */
export interface PatchGrid {
  readonly columns: number;
  readonly rows: number;
  /** Laplacian variance of each patch divided by its mean brightness squared, at full size. */
  readonly full: readonly number[];
  /** The same at half size. */
  readonly half: readonly number[];
  /** Mean brightness of each patch, 0 to 255. */
  readonly brightness: readonly number[];
}

/** What one pass over a frame's pixels measures. Stored as JSON beside the frame. */
export interface FrameMeasurements {
  /** Upright, after the EXIF orientation. */
  readonly widthPx: number;
  readonly heightPx: number;
  /** Population variance of the 4-neighbour Laplacian of the green channel, 0-255, full size, inner pixels. */
  readonly laplacianVariance: number;
  /** Mean of the green channel, 0 to 255. */
  readonly meanBrightness: number;
  /** Share of the picture that has texture enough to be registered, 0 (plain sky) to 1. */
  readonly texture: number;
  readonly patches: PatchGrid;
}

/** Upright grey picture of at most 256 px on its long side, not rounded to 8 bits; for registration only. */
export interface RegistrationImage {
  readonly data: Uint16Array;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** How two frames lie to each other, from their registration images. */
export interface PairMeasure {
  /** Where b's top left corner lies in a's full-size upright pixels: b pointed further right gives x above 0. */
  readonly xPx: number;
  readonly yPx: number;
  /** Normalised cross-correlation of the overlapping parts, -1 to 1. */
  readonly ncc: number;
  /** Best peak over the second best, 1 or more. */
  readonly peakRatio: number;
  /** Standard deviation of the high-passed overlap, relative to what counts as texture: under 1 is hardly any. */
  readonly contrast: number;
  /** Other shifts that match nearly as well, the best first: where patterns repeat, one of them may be the true one. */
  readonly rivals?: readonly { readonly xPx: number; readonly yPx: number; readonly ncc: number }[];
  /** Structural similarity (image-ssim) of the two small pictures laid over each other unshifted, -1 to 1. */
  readonly ssim: number;
}
