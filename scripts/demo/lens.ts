import type { Raster } from "./raster";

/** Weight of each neighbour in a three-tap blur of deviation 0.5 px: about what a good lens leaves at the pixel. */
const LENS_TAP = 0.125;

/** Softens a scene in place as the lens before it would: nothing in a photograph is sharper than the lens. */
export function softenLikeALens({ data, widthPx, heightPx }: Raster): void {
  const rowLength = widthPx * 3;
  let above = new Uint8Array(rowLength);
  let current = new Uint8Array(rowLength);
  for (let y = 0; y < heightPx; y++) {
    const start = y * rowLength;
    current.set(data.subarray(start, start + rowLength));
    if (y === 0) above.set(current);
    const belowAt = Math.min(heightPx - 1, y + 1) * rowLength;
    for (let i = 0; i < rowLength; i++) {
      data[start + i] =
        (1 - 2 * LENS_TAP) * (current[i] as number) +
        LENS_TAP * ((above[i] as number) + (data[belowAt + i] as number)) +
        0.5;
    }
    [above, current] = [current, above];
    softenRow(data, start, rowLength);
  }
}

function softenRow(data: Uint8Array, start: number, length: number): void {
  for (let channel = 0; channel < 3; channel++) {
    let before = data[start + channel] as number;
    for (let i = start + channel; i < start + length; i += 3) {
      const here = data[i] as number;
      const after = i + 3 < start + length ? (data[i + 3] as number) : here;
      data[i] = (1 - 2 * LENS_TAP) * here + LENS_TAP * (before + after) + 0.5;
      before = here;
    }
  }
}
