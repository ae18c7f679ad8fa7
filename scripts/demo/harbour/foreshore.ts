import { clampToByte, makeField, type Raster } from "../raster";
import { mixSeeds } from "../seeded-random";
import { addFractalNoise } from "../value-noise";
import { blend, type Colour } from "./colour";
import { QUAY_FOOT_Y, SCENE_SIZE, WATER_Y } from "./layout";
import type { Grain } from "./textures";

const DRY: Colour = [150, 132, 104];
const WET: Colour = [92, 84, 72];
const SHINGLE: Colour = [136, 130, 120];
const WEED: Colour = [78, 86, 48];
const SKY_IN_POOLS: Colour = [196, 206, 214];

/** For each column the row where the water begins. */
export function waterEdge(seed: number): Float32Array {
  const line = makeField(SCENE_SIZE.widthPx, 1);
  addFractalNoise(line, { cellPx: 700, smallestCellPx: 5, strength: 17, gain: 0.5, seed: mixSeeds(seed, 701) });
  return line.data.map((offset) => WATER_Y + offset);
}

/** Mud and shingle laid bare by the tide, with weed and pools that mirror wall and sky. */
export function drawForeshore(raster: Raster, grain: Grain, seed: number): void {
  const { widthPx } = SCENE_SIZE;
  const top = QUAY_FOOT_Y - 14;
  const rows = WATER_Y + 60 - top;
  const pools = makeField(widthPx, rows);
  addFractalNoise(pools, {
    cellPx: 26,
    smallestCellPx: 2,
    strength: 0.6,
    gain: 0.55,
    stretch: 7,
    seed: mixSeeds(seed, 702),
  });
  const patches = makeField(widthPx, rows);
  addFractalNoise(patches, {
    cellPx: 44,
    smallestCellPx: 3,
    strength: 0.6,
    gain: 0.6,
    stretch: 4,
    seed: mixSeeds(seed, 703),
  });
  const ripples = makeField(widthPx, rows);
  addFractalNoise(ripples, {
    cellPx: 7,
    smallestCellPx: 1.6,
    strength: 0.6,
    gain: 0.8,
    stretch: 3.4,
    seed: mixSeeds(seed, 704),
  });
  for (let row = 0; row < rows; row++) {
    const y = top + row;
    for (let x = 0; x < widthPx; x++) {
      const i = row * widthPx + x;
      const fine = grain.fine.data[y * widthPx + x] as number;
      // The foot of the wall is not a ruled line: stones and sand lie against it.
      if (y < QUAY_FOOT_Y + 5 * fine + 6 * (patches.data[i] as number)) continue;
      const near = (y - top) / (WATER_Y - top);
      const ground = groundColour(near, patches.data[i] as number, ripples.data[i] as number, fine);
      const pool = poolDepth(pools.data[i] as number, near);
      const mirrored = Math.max(0, Math.round(2 * QUAY_FOOT_Y - y - 6 * (ripples.data[i] as number)));
      const from = (mirrored * widthPx + x) * 3;
      const to = (y * widthPx + x) * 3;
      for (let channel = 0; channel < 3; channel++) {
        const water = 0.46 * (raster.data[from + channel] as number) + 0.44 * (SKY_IN_POOLS[channel] ?? 0);
        const level = (ground[channel] ?? 0) * (1 - pool) + water * pool;
        raster.data[to + channel] = clampToByte(level);
      }
    }
  }
}

function poolDepth(noise: number, near: number): number {
  const level = noise - 0.34 + 0.26 * near * near;
  return Math.max(0, Math.min(0.92, level * 14));
}

function groundColour(near: number, patch: number, ripple: number, fine: number): Colour {
  const wetness = Math.max(0, Math.min(1, 0.25 + 0.75 * near + 0.5 * patch));
  const sand = blend(DRY, WET, wetness);
  const stony = Math.max(0, Math.min(1, 1 - 3.2 * near + patch));
  const weedy = Math.max(0, Math.min(0.85, (patch - 0.22) * 4)) * (1 - 0.5 * near);
  const hard = fine / (Math.abs(fine) + 0.25);
  const light = 1 + 0.1 * ripple + (0.08 + 0.16 * Math.max(stony, weedy)) * hard;
  const colour = blend(blend(sand, SHINGLE, 0.7 * stony), WEED, weedy);
  return [colour[0] * light, colour[1] * light, colour[2] * light];
}
