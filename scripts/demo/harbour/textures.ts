import { type Field, makeField } from "../raster";
import { mixSeeds, mixThree } from "../seeded-random";
import { addFractalNoise } from "../value-noise";
import { MATERIALS } from "./drawing";
import { HIGH_TIDE_Y, QUAY_TOP_Y, SCENE_SIZE } from "./layout";

/** Noise that all materials share. */
export interface Grain {
  /** From 16 px down to the pixel, about -1.5 to 1.5. */
  readonly fine: Field;
  /** Stains and clouds, from 240 px down to 24. */
  readonly broad: Field;
}

export function makeGrain(seed: number): Grain {
  const fine = makeField(SCENE_SIZE.widthPx, SCENE_SIZE.heightPx);
  addFractalNoise(fine, { cellPx: 14, smallestCellPx: 1.6, strength: 0.55, gain: 0.92, seed: mixSeeds(seed, 501) });
  const broad = makeField(SCENE_SIZE.widthPx, SCENE_SIZE.heightPx);
  addFractalNoise(broad, { cellPx: 240, smallestCellPx: 24, strength: 0.55, gain: 0.6, seed: mixSeeds(seed, 502) });
  return { fine, broad };
}

/** Uniform in -1 to 1 for a cell of a pattern. */
const hash = (a: number, b: number, c: number) => mixThree(a, b, c) / 2147483648 - 1;

interface Spot {
  readonly x: number;
  readonly y: number;
  readonly fine: number;
  readonly broad: number;
  readonly variant: number;
}

type Texture = (spot: Spot) => number;

/** Rows of equal pieces with joints, each row set off against the one above. */
function courses(
  spot: Spot,
  size: { width: number; height: number; joint: number; tone: number; jointTone: number },
): number {
  const y = spot.y + spot.variant;
  const row = Math.floor(y / size.height);
  const inRow = y - row * size.height;
  const x = spot.x + (row % 2) * size.width * 0.5 + hash(row, spot.variant, 1) * size.width * 0.12;
  const column = Math.floor(x / size.width);
  const inColumn = x - column * size.width;
  const isJoint = inRow < size.joint || inColumn < size.joint;
  return isJoint ? size.jointTone : 1 + size.tone * hash(row, column, spot.variant);
}

const plaster: Texture = ({ x, fine, broad, variant }) =>
  1 + 0.07 * broad + 0.045 * fine + 0.02 * hash(Math.floor((x + 6 * broad) / 5), variant, 4);

const brick: Texture = (spot) =>
  courses(spot, { width: 21, height: 8, joint: 1.3, tone: 0.14, jointTone: 1.2 }) *
  (1 + 0.05 * spot.fine + 0.06 * spot.broad);

const slate: Texture = (spot) => {
  const inRow = ((spot.y + spot.variant) % 11) / 11;
  return (
    courses(spot, { width: 15, height: 11, joint: 1, tone: 0.1, jointTone: 0.68 }) *
    (1.05 - 0.12 * inRow + 0.05 * spot.fine + 0.07 * spot.broad)
  );
};

/** Pantiles: rounded across, each row's lower edge throwing a shadow on the next. */
const roofTile: Texture = (spot) => {
  const y = spot.y + 0.8 * spot.fine + spot.variant;
  const row = Math.floor(y / 10);
  const inRow = y / 10 - row;
  const column = Math.floor((spot.x + spot.variant) / 9);
  const inColumn = (spot.x + spot.variant) / 9 - column;
  const round = 0.86 + 0.2 * Math.sin(Math.PI * inColumn) - (inColumn > 0.86 ? 0.16 : 0);
  const edge = inRow < 0.16 ? 0.72 : 0.96 + 0.1 * inRow;
  return round * edge * (1 + 0.1 * hash(row, column, spot.variant) + 0.06 * spot.fine + 0.12 * spot.broad);
};

/** Stones of many sizes: the courses waver and no two stones are alike. */
const rubble: Texture = (spot) => {
  const wavering = { ...spot, x: spot.x + 2.6 * spot.fine, y: spot.y + 3 * spot.broad + 1.2 * spot.fine };
  return courses(wavering, { width: 27, height: 13, joint: 1.6, tone: 0.15, jointTone: 0.78 }) * (1 + 0.08 * spot.fine);
};

const paving: Texture = (spot) => {
  const far = { ...spot, x: spot.x + 2 * spot.fine, y: spot.y + 0.6 * spot.fine };
  return (
    courses(far, { width: 17, height: 6, joint: 1.1, tone: 0.1, jointTone: 0.76 }) *
    (1 + 0.07 * spot.fine + 0.09 * spot.broad)
  );
};

const timber: Texture = (spot) => {
  const plank = Math.floor((spot.x + spot.variant) / 9);
  const isGap = (spot.x + spot.variant) / 9 - plank < 0.12;
  return (isGap ? 0.66 : 1 + 0.07 * hash(plank, 3, spot.variant)) * (1 + 0.06 * spot.fine);
};

const crisp = (value: number) => value / (Math.abs(value) + 0.22);

/** Leaves: clumps with gaps, the upper left of each lit. */
const foliage: Texture = ({ x, y, fine, broad }) => {
  const leaf = hash(Math.floor((x + 4 * fine) / 3.1), Math.floor((y - 4 * fine) / 2.7), 5);
  return 1.02 + 0.13 * crisp(fine + 0.1) + 0.24 * leaf + 0.1 * broad;
};

/** The variant says how hazy: 0 near, 255 nothing left. */
const grass: Texture = ({ fine, broad, variant }) =>
  1 + (1 - variant / 255) * (0.1 * crisp(fine) + 0.09 * fine + 0.18 * broad);

const hull: Texture = ({ fine, broad }) => 1 + 0.03 * fine + 0.05 * broad;

const quayStone: Texture = (spot) => {
  const row = Math.floor((spot.y - QUAY_TOP_Y) / 37);
  const wavering = {
    ...spot,
    variant: 0,
    x: spot.x + 1.1 * spot.fine + 40 * hash(row, 7, 7),
    y: spot.y + 0.8 * spot.fine - QUAY_TOP_Y,
  };
  return (
    courses(wavering, { width: 84, height: 37, joint: 2.2, tone: 0.15, jointTone: 0.7 }) *
    (1 + 0.13 * spot.fine + 0.12 * spot.broad)
  );
};

const TEXTURES = new Map<number, Texture>([
  [MATERIALS.plaster, plaster],
  [MATERIALS.roofTile, roofTile],
  [MATERIALS.rubble, rubble],
  [MATERIALS.quayStone, quayStone],
  [MATERIALS.timber, timber],
  [MATERIALS.foliage, foliage],
  [MATERIALS.hull, hull],
  [MATERIALS.brick, brick],
  [MATERIALS.paving, paving],
  [MATERIALS.grass, grass],
  [MATERIALS.slate, slate],
  [MATERIALS.roofTileFar, (spot) => roofTile({ ...spot, x: spot.x * 2, y: spot.y * 2 })],
  [MATERIALS.rubbleFar, (spot) => rubble({ ...spot, x: spot.x * 1.9, y: spot.y * 1.9 })],
]);

/** Multiplies the colours of a drawing (alpha kept) by the fine structure of its materials. */
export function texturise(colours: Buffer, materials: Buffer, grain: Grain): void {
  const { widthPx, heightPx } = SCENE_SIZE;
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const pixel = y * widthPx + x;
      const at = pixel * 4;
      if (materials[at + 3] === 0 || colours[at + 3] === 0) continue;
      const material = materials[at] as number;
      const texture = TEXTURES.get(material);
      if (!texture) continue;
      const fine = grain.fine.data[pixel] as number;
      const broad = grain.broad.data[pixel] as number;
      const light = texture({ x, y, fine, broad, variant: materials[at + 1] as number });
      for (let channel = 0; channel < 3; channel++) {
        const value = (colours[at + channel] as number) * light;
        colours[at + channel] = value > 255 ? 255 : value;
      }
      if (material === MATERIALS.quayStone) growWeed(colours, at, y, { fine, broad });
    }
  }
}

/** Below the high-tide line the wall is wet, dark and green, in a ragged band. */
function growWeed(colours: Buffer, at: number, y: number, noise: { fine: number; broad: number }): void {
  const depth = y - HIGH_TIDE_Y + 34 * noise.broad + 10 * noise.fine;
  const wet = Math.max(0, Math.min(1, (depth + 46) / 30));
  const weed = Math.max(0, Math.min(1, depth / 26)) * (0.62 + 0.3 * crisp(noise.fine));
  const tide = [58, 66, 40];
  for (let channel = 0; channel < 3; channel++) {
    const value = (colours[at + channel] as number) * (1 - 0.34 * wet);
    colours[at + channel] = value + weed * ((tide[channel] ?? 0) * (1 + 0.35 * crisp(noise.fine)) - value);
  }
}
