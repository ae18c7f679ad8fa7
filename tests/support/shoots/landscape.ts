import type { FrameSize } from "@/scripts/demo/pose";
import { clampToByte, makeField } from "@/scripts/demo/raster";
import { makeRandom, mixSeeds } from "@/scripts/demo/seeded-random";
import { addFractalNoise } from "@/scripts/demo/value-noise";
import type { Scene } from "./scene";

type Colour = readonly [red: number, green: number, blue: number];

interface Range {
  readonly colour: Colour;
  /** Row where it begins, for each column. */
  readonly topPx: Float32Array;
  /** Levels between its lightest and darkest spots, halved. */
  readonly contrast: number;
}

function ridge(
  widthPx: number,
  level: { basePx: number; heightPx: number; cellPx: number; seed: number },
): Float32Array {
  const line = makeField(widthPx, 1);
  addFractalNoise(line, {
    cellPx: level.cellPx,
    smallestCellPx: 2,
    strength: level.heightPx,
    gain: 0.5,
    seed: level.seed,
  });
  return line.data.map((offset) => level.basePx + offset);
}

/** Hills one behind the other under a plain sky, with rock, scrub and grass down to the pixel. */
export function drawLandscape(size: FrameSize, seed: number, skyPart: number): Scene {
  const { widthPx, heightPx } = size;
  const random = makeRandom(mixSeeds(seed, 11));
  const texture = makeField(widthPx, heightPx);
  addFractalNoise(texture, { cellPx: 320, smallestCellPx: 1.3, strength: 1, gain: 0.72, seed: mixSeeds(seed, 12) });
  // Scrub and stones, with the hard edges that tell a sharp frame from a soft one.
  const grain = makeField(widthPx, heightPx);
  addFractalNoise(grain, { cellPx: 18, smallestCellPx: 1.6, strength: 0.5, gain: 0.9, seed: mixSeeds(seed, 13) });
  const skyPx = heightPx * skyPart;
  const land = heightPx - skyPx;
  const ranges: Range[] = [
    { part: 0, height: 0.11, colour: [133, 148, 166], contrast: 15 },
    { part: 0.16, height: 0.09, colour: [104, 120, 118], contrast: 24 },
    { part: 0.34, height: 0.07, colour: [98, 108, 74], contrast: 34 },
    { part: 0.62, height: 0.05, colour: [112, 104, 70], contrast: 42 },
  ].map(({ part, height, colour, contrast }, i) => ({
    colour: colour.map((level) => level + random.between(-14, 14)) as unknown as Colour,
    contrast,
    topPx: ridge(widthPx, {
      basePx: skyPx + land * (part + 0.06),
      heightPx: land * height,
      cellPx: widthPx / (4 + 2 * i),
      seed: mixSeeds(seed, 20 + i),
    }),
  }));
  const data = new Uint8Array(widthPx * heightPx * 3);
  const skylinePx = new Float32Array(widthPx);
  for (let x = 0; x < widthPx; x++) skylinePx[x] = Math.min(...ranges.map(({ topPx }) => topPx[x] ?? heightPx));
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const at = (y * widthPx + x) * 3;
      let range: Range | null = null;
      for (const candidate of ranges) if (y >= (candidate.topPx[x] as number)) range = candidate;
      if (!range) {
        const low = Math.min(1, y / Math.max(1, skyPx));
        data[at] = clampToByte(120 + 70 * low);
        data[at + 1] = clampToByte(160 + 45 * low);
        data[at + 2] = clampToByte(212 + 18 * low);
        continue;
      }
      const depth = Math.min(1, (y - (range.topPx[x] as number)) / (land * 0.3));
      const scrub = grain.data[y * widthPx + x] as number;
      const crisp = scrub / (Math.abs(scrub) + 0.25);
      const tone = ((texture.data[y * widthPx + x] as number) + 0.7 * crisp) * range.contrast - depth * 14;
      data[at] = clampToByte(range.colour[0] + tone);
      data[at + 1] = clampToByte(range.colour[1] + tone);
      data[at + 2] = clampToByte(range.colour[2] + tone * 0.8);
    }
  }
  return { raster: { data, widthPx, heightPx }, skylinePx };
}
