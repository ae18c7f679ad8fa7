import type { FrameSize } from "@/scripts/demo/pose";
import { clampToByte, makeField } from "@/scripts/demo/raster";
import { makeRandom, mixSeeds, mixThree, type SeededRandom } from "@/scripts/demo/seeded-random";
import { addFractalNoise } from "@/scripts/demo/value-noise";
import type { Scene } from "./scene";

interface House {
  readonly leftPx: number;
  readonly rightPx: number;
  readonly topPx: number;
  readonly wall: readonly number[];
  readonly pitchXPx: number;
  readonly pitchYPx: number;
  readonly windowXPx: number;
  readonly windowYPx: number;
  readonly seed: number;
}

function drawHouses(widthPx: number, basePx: number, heightPx: number, random: SeededRandom): House[] {
  const houses: House[] = [];
  let left = -random.between(0, 100);
  while (left < widthPx) {
    const width = random.between(0.12, 0.4) * heightPx + 60;
    const pitchXPx = random.whole(24, 52);
    const pitchYPx = random.whole(34, 64);
    const grey = random.between(80, 190);
    houses.push({
      leftPx: left,
      rightPx: left + width,
      topPx: basePx + random.between(0, 0.12) * heightPx,
      wall: [grey + random.between(-5, 25), grey + random.between(-10, 8), grey + random.between(-25, 5)],
      pitchXPx,
      pitchYPx,
      windowXPx: pitchXPx * random.between(0.4, 0.65),
      windowYPx: pitchYPx * random.between(0.45, 0.7),
      seed: Math.floor(random.next() * 1e9),
    });
    left += width;
  }
  return houses;
}

/** Fronts of houses full of windows that repeat, a street below, plain sky above. */
export function drawCity(size: FrameSize, seed: number, skyPart: number): Scene {
  const { widthPx, heightPx } = size;
  const random = makeRandom(mixSeeds(seed, 31));
  const texture = makeField(widthPx, heightPx);
  addFractalNoise(texture, { cellPx: 90, smallestCellPx: 1.5, strength: 0.6, gain: 0.95, seed: mixSeeds(seed, 32) });
  const skyPx = heightPx * skyPart;
  const streetPx = heightPx * 0.86;
  const houses = drawHouses(widthPx, skyPx, heightPx, random);
  const data = new Uint8Array(widthPx * heightPx * 3);
  const skylinePx = new Float32Array(widthPx);
  let next = 0;
  for (let x = 0; x < widthPx; x++) {
    while (x >= (houses[next]?.rightPx ?? Infinity)) next++;
    const house = houses[next];
    if (!house) throw new Error("expected the houses to fill the street");
    skylinePx[x] = house.topPx;
    for (let y = 0; y < heightPx; y++) {
      const at = (y * widthPx + x) * 3;
      const grain = texture.data[y * widthPx + x] as number;
      const [red, green, blue] =
        y < house.topPx ? skyAt(y / skyPx) : y > streetPx ? streetAt(grain) : houseAt(house, x, y, grain);
      data[at] = clampToByte(red);
      data[at + 1] = clampToByte(green);
      data[at + 2] = clampToByte(blue);
    }
  }
  return { raster: { data, widthPx, heightPx }, skylinePx };
}

const skyAt = (down: number): [number, number, number] => {
  const low = Math.min(1.3, down);
  return [150 + 50 * low, 172 + 36 * low, 200 + 22 * low];
};

const streetAt = (grain: number): [number, number, number] => [96 + 44 * grain, 95 + 44 * grain, 92 + 44 * grain];

function houseAt(house: House, x: number, y: number, grain: number): [number, number, number] {
  const inX = x - house.leftPx;
  const inY = y - house.topPx;
  const column = Math.floor(inX / house.pitchXPx);
  const floor = Math.floor(inY / house.pitchYPx);
  const windowX = inX - column * house.pitchXPx - (house.pitchXPx - house.windowXPx) / 2;
  const windowY = inY - floor * house.pitchYPx - (house.pitchYPx - house.windowYPx) / 2;
  const pane = inY > 12 ? within(windowX, house.windowXPx) * within(windowY, house.windowYPx) : 0;
  const edge = Math.max(1 - within(inX - 3, house.rightPx - house.leftPx), 1 - within(inY - 6, 1e6));
  const wallTone = grain * 16 - edge * 40;
  // Curtains, lamps and reflections: no two windows are quite alike, but nearly.
  const own = mixThree(house.seed, column, floor) / 4294967296;
  const bar = Math.max(
    within(windowX - house.windowXPx / 2 + 1.2, 2.4),
    within(windowY - house.windowYPx * 0.4 + 1.2, 2.4),
  );
  const lit = own > 0.93 ? 90 * within(windowY - house.windowYPx * own * 0.5, house.windowYPx) : 0;
  const paneTone = 30 + 34 * own + grain * 8 + lit + bar * 70;
  const mix = (wall: number, tint: number) => (1 - pane) * (wall + wallTone) + pane * (paneTone + tint);
  const [red = 0, green = 0, blue = 0] = house.wall;
  return [mix(red, 0), mix(green, 3), mix(blue, 9)];
}

/** How much of the pixel at `at` lies between 0 and `lengthPx`: hard edges would flicker with the fraction of a pixel. */
function within(at: number, lengthPx: number): number {
  const before = at + 0.5;
  const after = lengthPx - at + 0.5;
  return (before < 0 ? 0 : before > 1 ? 1 : before) * (after < 0 ? 0 : after > 1 ? 1 : after);
}
