import { clampToByte, makeField, type Raster } from "../raster";
import { mixSeeds } from "../seeded-random";
import { addFractalNoise } from "../value-noise";
import { blend, type Colour } from "./colour";
import { HORIZON_Y, SCENE_SIZE } from "./layout";

const ZENITH: Colour = [112, 148, 190];
const MIDDLE: Colour = [164, 190, 212];
const LOW: Colour = [224, 222, 212];
const CLOUD_LIT: Colour = [246, 240, 230];
const CLOUD_SHADE: Colour = [168, 178, 192];
/** The sky is drawn at a third of the size and enlarged: clouds have no edges at the pixel. */
const COARSE = 3;

/** A fair morning: blue above, hazy over the land, with broken cloud lit from the left. */
export function drawSky(raster: Raster, seed: number): void {
  const width = Math.ceil(raster.widthPx / COARSE) + 2;
  const height = Math.ceil(HORIZON_Y / COARSE) + 2;
  const clouds = makeField(width, height);
  addFractalNoise(clouds, {
    cellPx: 150,
    smallestCellPx: 2,
    strength: 0.62,
    gain: 0.58,
    stretch: 1.6,
    seed: mixSeeds(seed, 601),
  });
  const wisps = makeField(width, height);
  addFractalNoise(wisps, {
    cellPx: 40,
    smallestCellPx: 2,
    strength: 0.5,
    gain: 0.62,
    stretch: 7,
    seed: mixSeeds(seed, 602),
  });
  const coarse = new Float32Array(width * height * 3);
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const colour = skyColour(x / width, (y * COARSE) / HORIZON_Y, {
        here: clouds.data[y * width + x] ?? 0,
        // Towards the sun: where the cloud is thinner there, its edge is lit.
        sunward: clouds.data[Math.max(0, y - 7) * width + Math.max(0, x - 9)] ?? 0,
        wisp: wisps.data[y * width + x] ?? 0,
      });
      coarse.set(colour, (y * width + x) * 3);
    }
  }
  enlarge(coarse, width, raster);
}

const ramp = (value: number, from: number, to: number) => {
  const t = Math.max(0, Math.min(1, (value - from) / (to - from)));
  return t * t * (3 - 2 * t);
};

function skyColour(across: number, down: number, cloud: { here: number; sunward: number; wisp: number }): Colour {
  const base = down < 0.45 ? blend(ZENITH, MIDDLE, down / 0.45) : blend(MIDDLE, LOW, Math.min(1, (down - 0.45) / 0.5));
  const glow = Math.exp(-(((across - 0.06) / 0.35) ** 2)) * (0.25 + 0.4 * down);
  const air = blend(base, [250, 236, 208], Math.min(0.75, glow));
  const band = Math.exp(-(((down - 0.3) / 0.3) ** 2));
  const density = ramp(cloud.here + 0.22 * cloud.wisp, 0.1 - 0.2 * band, 0.6 - 0.16 * band);
  const lit = ramp(cloud.here - cloud.sunward, -0.3, 0.24);
  const body = blend(CLOUD_SHADE, CLOUD_LIT, 0.25 + 0.75 * lit);
  const veil = 0.22 * ramp(cloud.wisp, 0.05, 0.7) * (1 - down);
  return blend(blend(air, CLOUD_LIT, veil), blend(body, air, 0.2 + 0.4 * down), 0.92 * density);
}

function enlarge(coarse: Float32Array, width: number, raster: Raster): void {
  const { data, widthPx } = raster;
  for (let y = 0; y < HORIZON_Y; y++) {
    const row = Math.floor(y / COARSE);
    const down = y / COARSE - row;
    for (let x = 0; x < widthPx; x++) {
      const column = Math.floor(x / COARSE);
      const across = x / COARSE - column;
      const from = (row * width + column) * 3;
      const to = (y * widthPx + x) * 3;
      for (let channel = 0; channel < 3; channel++) {
        const i = from + channel;
        const upper = (coarse[i] as number) + across * ((coarse[i + 3] as number) - (coarse[i] as number));
        const below = i + width * 3;
        const lower = (coarse[below] as number) + across * ((coarse[below + 3] as number) - (coarse[below] as number));
        data[to + channel] = clampToByte(upper + down * (lower - upper));
      }
    }
  }
  for (let y = HORIZON_Y; y < SCENE_SIZE.heightPx; y++) {
    data.copyWithin(y * widthPx * 3, (HORIZON_Y - 1) * widthPx * 3, HORIZON_Y * widthPx * 3);
  }
}
