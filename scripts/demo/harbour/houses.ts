import { mixSeeds, makeRandom, type SeededRandom } from "../seeded-random";
import { blend, type Colour, css, HAZE, shade } from "./colour";
import type { Drawing, Material } from "./drawing";
import { SCENE_SIZE, STREET_Y } from "./layout";
import { drawGroundFloor } from "./ground-floor";
import { drawRoof, type RoofKind } from "./roofs";
import { drawWindow, type WindowStyle } from "./windows";

export interface House {
  readonly left: number;
  readonly width: number;
  readonly base: number;
  readonly eaves: number;
  readonly wall: Colour;
  readonly wallMaterial: Material;
  readonly trim: Colour;
  readonly roof: RoofKind;
  readonly roofColour: Colour;
  readonly floors: number;
  readonly seed: number;
}

const WALLS: readonly (readonly [Colour, Material])[] = [
  [[226, 212, 184], "plaster"],
  [[214, 178, 128], "plaster"],
  [[196, 122, 96], "plaster"],
  [[232, 226, 214], "plaster"],
  [[168, 188, 196], "plaster"],
  [[150, 92, 74], "brick"],
  [[178, 194, 170], "plaster"],
  [[222, 186, 160], "plaster"],
  [[172, 164, 150], "rubble"],
  [[206, 196, 148], "plaster"],
  [[128, 84, 70], "brick"],
  [[186, 150, 132], "plaster"],
];
const ROOFS: readonly Colour[] = [
  [146, 92, 70],
  [134, 84, 68],
  [158, 106, 80],
  [94, 96, 102],
  [124, 84, 68],
  [108, 104, 100],
];
const SHUTTERS: readonly Colour[] = [
  [62, 92, 96],
  [88, 60, 52],
  [54, 74, 104],
  [96, 108, 84],
  [150, 158, 156],
];

/** The fronts along the quay, from left to right, each its own builder's work. */
export function planFrontRow(seed: number): House[] {
  const random = makeRandom(mixSeeds(seed, 101));
  const houses: House[] = [];
  let left = -70;
  let before = -1;
  while (left < SCENE_SIZE.widthPx + 40) {
    const width = random.between(190, 350);
    let choice = random.whole(0, WALLS.length - 1);
    if (choice === before) choice = (choice + 1) % WALLS.length;
    before = choice;
    const [wall, wallMaterial] = WALLS[choice] ?? [[220, 210, 190], "plaster"];
    const floors = random.pick([3, 3, 4, 4, 2]);
    const storey = random.between(104, 122);
    const roof: RoofKind = random.pick(
      width > 280 ? ["eaves", "eaves", "hip", "gable"] : ["gable", "stepped", "eaves", "bell"],
    );
    houses.push({
      left,
      width,
      base: STREET_Y,
      eaves: STREET_Y - 140 - (floors - 1) * storey,
      wall: shade(wall, random.between(0.92, 1.04)),
      wallMaterial,
      trim: random.pick<Colour>([
        [236, 230, 218],
        [222, 214, 200],
        [240, 238, 232],
        [92, 84, 76],
      ]),
      roof,
      roofColour: shade(random.pick(ROOFS), random.between(0.9, 1.08)),
      floors,
      seed: mixSeeds(seed, 102, houses.length),
    });
    // Here and there a lane leads up between the houses.
    left += width + (random.chance(0.18) ? random.between(26, 44) : 0);
  }
  return houses;
}

export function drawFrontHouse(drawing: Drawing, house: House): void {
  const random = makeRandom(house.seed);
  const { left, width, base, eaves } = house;
  drawRoof(drawing, house, random);
  drawing.rect(left, eaves, width, base - eaves, {
    fill: css(house.wall),
    material: house.wallMaterial,
    variant: random.whole(0, 255),
  });
  drawWeather(drawing, house, random);
  drawCornice(drawing, house);
  drawFloors(drawing, house, random);
  drawGroundFloor(drawing, house, random);
  drawDownpipe(drawing, house, random);
}

/** Damp at the foot, streaks below the eaves, and the shade that the neighbour on the sunny side throws. */
function drawWeather(drawing: Drawing, house: House, random: SeededRandom): void {
  const { left, width, base, eaves } = house;
  const shading = drawing.verticalGradient(`wall${Math.round(left)}`, [
    [0, "#fff4dc", 0.1],
    [0.5, "#808080", 0],
    [1, "#14161c", 0.24],
  ]);
  drawing.rect(left, eaves, width, base - eaves, { fill: shading, opacity: 0.99 });
  drawing.rect(left, eaves, width, 26, { fill: "#181a24", opacity: 0.34 });
  drawing.rect(left, eaves + 26, width, 10, { fill: "#181a24", opacity: 0.14 });
  drawing.rect(left, base - 46, width, 46, { fill: "#2c2a28", opacity: 0.14 });
  drawing.rect(left, base - 18, width, 18, { fill: "#2c2a28", opacity: 0.22 });
  drawing.rect(left, eaves, random.between(4, 22), base - eaves, { fill: "#20222c", opacity: 0.2 });
  for (let streak = 0; streak < 16; streak++) {
    const x = left + random.between(6, width - 14);
    const length = random.between(40, 190);
    drawing.rect(x, eaves + 20, random.between(2, 9), length, { fill: "#3a3630", opacity: random.between(0.03, 0.13) });
  }
}

function drawCornice(drawing: Drawing, house: House): void {
  if (house.roof !== "eaves" && house.roof !== "hip") return;
  drawing.rect(house.left - 6, house.eaves - 6, house.width + 12, 12, { fill: css(house.trim), material: "plaster" });
  drawing.rect(house.left - 6, house.eaves + 6, house.width + 12, 4, { fill: css(shade(house.trim, 0.68)) });
}

function drawFloors(drawing: Drawing, house: House, random: SeededRandom): void {
  const { left, width, base, eaves, floors } = house;
  const upper = floors - 1;
  const storey = (base - 140 - eaves) / Math.max(1, upper);
  const axes = Math.max(2, Math.round(width / random.between(66, 88)));
  const pitch = width / axes;
  const hasShutters = random.chance(0.4) && pitch > 76;
  const style: WindowStyle = {
    widthPx: pitch * (hasShutters ? 0.4 : random.between(0.46, 0.56)),
    heightPx: storey * random.between(0.54, 0.64),
    frame: random.pick<Colour>([
      [238, 234, 226],
      [230, 226, 216],
      [70, 62, 56],
      [66, 82, 80],
    ]),
    shutter: hasShutters ? random.pick(SHUTTERS) : null,
    bars: { across: 2, down: random.pick([2, 3, 4]) },
    hasSill: true,
    hasLintel: random.chance(0.55),
    haze: 0,
    hazeColour: HAZE,
  };
  const hasBands = random.chance(0.4);
  for (let floor = 0; floor < upper; floor++) {
    const floorTop = eaves + floor * storey;
    if (hasBands && floor > 0)
      drawing.rect(left, floorTop - 4, width, 8, { fill: css(house.trim), material: "plaster" });
    for (let axis = 0; axis < axes; axis++) {
      if (random.chance(0.03)) continue;
      const x = left + pitch * (axis + 0.5) - style.widthPx / 2;
      drawWindow(drawing, x, floorTop + storey * 0.24, style, random);
      if (random.chance(0.12))
        drawFlowerBox(drawing, x, floorTop + storey * 0.24 + style.heightPx, style.widthPx, random);
    }
  }
}

function drawFlowerBox(drawing: Drawing, x: number, y: number, width: number, random: SeededRandom): void {
  drawing.rect(x - 2, y - 4, width + 4, 11, { fill: "#6a4c38", material: "timber" });
  for (let i = 0; i < 22; i++) {
    const colour = random.pick(["#4c6a34", "#5d7c3c", "#3d5a2e", "#b8382e", "#d8c8d0", "#c84a5a"]);
    drawing.ellipse(
      x + random.between(0, width),
      y - random.between(2, 14),
      random.between(2, 5),
      random.between(2, 4),
      { fill: colour },
    );
  }
}

function drawDownpipe(drawing: Drawing, house: House, random: SeededRandom): void {
  if (!random.chance(0.7)) return;
  const x = house.left + house.width - 9;
  const colour = random.pick(["#5c6064", "#76786e", "#4c5248"]);
  drawing.rect(x + 5, house.eaves + 10, 4, house.base - house.eaves - 20, { fill: "#16181e", opacity: 0.3 });
  drawing.rect(x, house.eaves + 6, 5, house.base - house.eaves - 10, { fill: colour });
  for (let y = house.eaves + 60; y < house.base - 30; y += 92) drawing.rect(x - 1.5, y, 8, 4, { fill: "#4a4c4e" });
}

/** Houses on the slope behind, smaller and paler the farther up. @param depth 0 near to 1 at the top of the hill */
export function drawBackHouse(drawing: Drawing, at: { x: number; base: number; depth: number; seed: number }): void {
  const random = makeRandom(at.seed);
  const scale = 0.62 - 0.24 * at.depth;
  const width = random.between(120, 230) * scale;
  const height = random.between(130, 240) * scale;
  const haze = 0.14 + 0.3 * at.depth;
  const [wall, wallMaterial] = random.pick(WALLS);
  const house: House = {
    left: at.x - width / 2,
    width,
    base: at.base,
    eaves: at.base - height,
    wall: blend(shade(wall, 0.97), HAZE, haze),
    wallMaterial: wallMaterial === "brick" ? "plaster" : wallMaterial,
    trim: blend([232, 226, 214], HAZE, haze),
    roof: random.pick(["gable", "eaves", "hip"]),
    roofColour: blend(random.pick(ROOFS), HAZE, haze),
    floors: 2,
    seed: at.seed,
  };
  drawRoof(drawing, house, random);
  drawing.rect(house.left, house.eaves, width, height, {
    fill: css(house.wall),
    material: house.wallMaterial,
    variant: at.seed % 256,
  });
  drawing.rect(house.left, house.eaves, width, 9, { fill: "#20242e", opacity: 0.28 * (1 - haze) });
  const axes = Math.max(2, Math.round(width / (54 * scale)));
  const rows = Math.max(1, Math.round(height / (92 * scale)));
  const style: WindowStyle = {
    widthPx: (width / axes) * 0.44,
    heightPx: (height / rows) * 0.5,
    frame: [234, 230, 222],
    shutter: random.chance(0.25) ? random.pick(SHUTTERS) : null,
    bars: { across: 2, down: 2 },
    hasSill: false,
    hasLintel: false,
    haze,
    hazeColour: HAZE,
  };
  for (let row = 0; row < rows; row++) {
    for (let axis = 0; axis < axes; axis++) {
      if (random.chance(0.08)) continue;
      const x = house.left + (width / axes) * (axis + 0.5) - style.widthPx / 2;
      drawWindow(drawing, x, house.eaves + (height / rows) * (row + 0.25), style, random);
    }
  }
}
