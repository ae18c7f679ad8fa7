/** A colour picture in memory: red, green, blue interleaved, row by row, 0 to 255 as a screen shows them. */
export interface Raster {
  readonly data: Uint8Array;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** One number per pixel, row by row. */
export interface Field {
  readonly data: Float32Array;
  readonly widthPx: number;
  readonly heightPx: number;
}

export function makeField(widthPx: number, heightPx: number): Field {
  return { data: new Float32Array(widthPx * heightPx), widthPx, heightPx };
}

export function clampToByte(value: number): number {
  return value < 0 ? 0 : value > 255 ? 255 : value + 0.5;
}
