import { clampToByte, type Field, makeField, type Raster } from "../raster";
import { mixSeeds } from "../seeded-random";
import { addFractalNoise } from "../value-noise";
import { blend, type Colour } from "./colour";
import { SCENE_SIZE, WATER_Y } from "./layout";

const DEEP: Colour = [58, 80, 84];
const SKY_NEAR: Colour = [158, 182, 202];
const SKY_FAR: Colour = [214, 216, 212];
/** Above every edge that the water may have. */
const TOP_Y = WATER_Y - 50;

interface Waves {
  /** Fine ripples as they look far off, and broad ones near by. */
  readonly far: Field;
  readonly near: Field;
}

function makeWaves(seed: number): Waves {
  const rows = SCENE_SIZE.heightPx - TOP_Y;
  const far = makeField(SCENE_SIZE.widthPx, rows);
  addFractalNoise(far, {
    cellPx: 7,
    smallestCellPx: 1.4,
    strength: 0.62,
    gain: 0.7,
    stretch: 8,
    seed: mixSeeds(seed, 801),
  });
  const near = makeField(SCENE_SIZE.widthPx, rows);
  addFractalNoise(near, {
    cellPx: 26,
    smallestCellPx: 2.4,
    strength: 0.6,
    gain: 0.62,
    stretch: 5.5,
    seed: mixSeeds(seed, 802),
  });
  return { far, near };
}

/**
 * Fills the channel with rippled water that mirrors what is drawn above its edge.
 * @param mirroredBoats - red, green, blue, alpha of the boats afloat, upside down below their water lines
 */
export function drawWater(raster: Raster, edge: Float32Array, mirroredBoats: Buffer, seed: number): void {
  const { widthPx, heightPx } = SCENE_SIZE;
  const waves = makeWaves(seed);
  for (let y = TOP_Y; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const shore = edge[x] as number;
      if (y < shore) continue;
      const i = (y - TOP_Y) * widthPx + x;
      const near = Math.min(1, (y - shore) / (heightPx - shore));
      const wave = (1 - near) * (waves.far.data[i] as number) + (0.25 + near) * (waves.near.data[i] as number);
      const slope =
        wave - (1 - near) * (waves.far.data[i + widthPx] ?? 0) - (0.25 + near) * (waves.near.data[i + widthPx] ?? 0);
      drawWaterPixel(raster, mirroredBoats, { x, y, shore, near, wave, slope });
    }
  }
}

interface WaterSpot {
  readonly x: number;
  readonly y: number;
  readonly shore: number;
  /** 0 at the shore, 1 at the lower edge. */
  readonly near: number;
  readonly wave: number;
  readonly slope: number;
}

function drawWaterPixel(raster: Raster, boats: Buffer, spot: WaterSpot): void {
  const { widthPx, heightPx } = SCENE_SIZE;
  const { x, y, shore, near, wave, slope } = spot;
  const shiftX = Math.round(wave * (3 + 13 * near));
  const shiftY = Math.round(wave * (5 + 34 * near));
  const column = Math.max(0, Math.min(widthPx - 1, x + shiftX));
  const mirrorRow = Math.max(
    0,
    Math.min(heightPx - 1, Math.round(shore - 1.75 * (y - shore) - Math.abs(shiftY) * 1.6)),
  );
  const from = (mirrorRow * widthPx + column) * 3;
  const boatRow = Math.max(0, Math.min(heightPx - 1, y + shiftY));
  const boat = (boatRow * widthPx + column) * 4;
  const boatShare = (boats[boat + 3] as number) / 255;
  // Faces turned to us show the water's depth, those turned away the sky.
  const sky = Math.max(0, Math.min(1, 0.3 + 0.3 * wave + (0.9 + 1.1 * near) * slope));
  const own = Math.max(0.12, Math.min(0.8, 0.24 + 0.26 * near - (0.6 + 1.1 * near) * slope));
  const skyColour = blend(SKY_FAR, SKY_NEAR, near);
  const glint = Math.max(0, Math.min(1, (slope - 0.34) * 7)) * 46;
  const to = (y * widthPx + x) * 3;
  const foam = Math.max(0, 1 - (y - shore) / 3.5) * 0.5;
  for (let channel = 0; channel < 3; channel++) {
    const mirrored = raster.data[from + channel] as number;
    const land = mirrored + boatShare * ((boats[boat + channel] as number) - mirrored);
    const seen = land * (1 - sky * (1 - 0.75 * boatShare)) + (skyColour[channel] ?? 0) * sky * (1 - 0.75 * boatShare);
    const level = seen * (1 - own) + (DEEP[channel] ?? 0) * own + glint;
    raster.data[to + channel] = clampToByte(level + foam * (225 - level));
  }
}
