import { makeField } from "../raster";
import { makeRandom, mixSeeds, type SeededRandom } from "../seeded-random";
import { addFractalNoise } from "../value-noise";
import { blend, type Colour, css, HAZE, shade } from "./colour";
import type { Drawing } from "./drawing";
import { drawBackHouse } from "./houses";
import { HORIZON_Y, SCENE_SIZE, STREET_Y } from "./layout";

/** The hill's outline: height of its ridge for each column, lowest towards the sea on the right. */
export function hillRidge(seed: number): Float32Array {
  const { widthPx } = SCENE_SIZE;
  const line = makeField(widthPx, 1);
  addFractalNoise(line, { cellPx: 1500, smallestCellPx: 6, strength: 120, gain: 0.46, seed: mixSeeds(seed, 201) });
  return line.data.map((offset, x) => {
    const part = x / widthPx;
    const fall = Math.max(0, (part - 0.72) / 0.28);
    return 660 + offset - 90 * Math.exp(-(((part - 0.3) / 0.22) ** 2)) + 330 * fall ** 1.4;
  });
}

function outlinePath(heights: Float32Array, step: number): string {
  const { widthPx } = SCENE_SIZE;
  const points: string[] = [`M-10 ${STREET_Y}`];
  for (let x = -10; x <= widthPx + 10; x += step) {
    const y = heights[Math.max(0, Math.min(widthPx - 1, x))] ?? STREET_Y;
    points.push(`L${x} ${y.toFixed(1)}`);
  }
  return `${points.join("")}L${widthPx + 10} ${STREET_Y}Z`;
}

/** Blue ridges across the bay, the far shore with its villages. */
export function drawFarShore(drawing: Drawing, seed: number): void {
  const { widthPx } = SCENE_SIZE;
  const layers: { base: number; rise: number; cell: number; haze: number; colour: Colour }[] = [
    { base: 770, rise: 110, cell: 1300, haze: 0.72, colour: [104, 122, 146] },
    { base: 900, rise: 90, cell: 900, haze: 0.58, colour: [92, 110, 122] },
    { base: 1040, rise: 70, cell: 620, haze: 0.42, colour: [86, 102, 96] },
  ];
  for (const [index, layer] of layers.entries()) {
    const line = makeField(widthPx, 1);
    addFractalNoise(line, {
      cellPx: layer.cell,
      smallestCellPx: 4,
      strength: layer.rise,
      gain: 0.5,
      seed: mixSeeds(seed, 202, index),
    });
    const heights = line.data.map((offset) => layer.base + offset);
    drawing.path(outlinePath(heights, 4), {
      fill: css(blend(layer.colour, HAZE, layer.haze)),
      material: "grass",
      variant: 200 - 60 * index,
    });
  }
  const random = makeRandom(mixSeeds(seed, 203));
  for (let i = 0; i < 60; i++) {
    const x = widthPx * random.between(0.7, 1);
    const y = random.between(1120, HORIZON_Y - 6);
    const size = random.between(5, 12);
    drawing.rect(x, y, size * 1.5, size, {
      fill: css(
        blend(
          random.pick<Colour>([
            [240, 236, 226],
            [214, 196, 170],
          ]),
          HAZE,
          0.35,
        ),
      ),
    });
    drawing.polygon(
      [
        [x - 1, y],
        [x + size * 0.75, y - size * 0.5],
        [x + size * 1.5 + 1, y],
      ],
      { fill: css(blend([150, 92, 72], HAZE, 0.45)) },
    );
  }
}

/** The slope behind the town: grass, walls, trees and houses, drawn from the top down so that the near covers the far. */
export function drawHill(drawing: Drawing, seed: number): void {
  const random = makeRandom(mixSeeds(seed, 204));
  const ridge = hillRidge(seed);
  drawing.path(outlinePath(ridge, 3), { fill: css(blend([112, 124, 84], HAZE, 0.26)), material: "grass", variant: 90 });
  const things: { x: number; y: number; draw: () => void }[] = [];
  for (let i = 0; i < 250; i++) {
    const x = random.between(-40, SCENE_SIZE.widthPx + 40);
    const top = ridge[Math.max(0, Math.min(SCENE_SIZE.widthPx - 1, Math.round(x)))] ?? 800;
    const y = top + 26 + (STREET_Y - 260 - top) * random.next() ** 0.85;
    const depth = Math.max(0, Math.min(1, (STREET_Y - 300 - y) / 520));
    const houseSeed = mixSeeds(seed, 205, i);
    things.push({ x, y, draw: () => drawBackHouse(drawing, { x, base: y + 40, depth, seed: houseSeed }) });
  }
  for (let i = 0; i < 620; i++) {
    const x = random.between(-40, SCENE_SIZE.widthPx + 40);
    const top = ridge[Math.max(0, Math.min(SCENE_SIZE.widthPx - 1, Math.round(x)))] ?? 800;
    const y = top + 8 + (STREET_Y - 230 - top) * random.next();
    const depth = Math.max(0, Math.min(1, (STREET_Y - 300 - y) / 520));
    const treeSeed = mixSeeds(seed, 206, i);
    things.push({ x, y: y + 34, draw: () => drawHillTree(drawing, { x, base: y + 34, depth }, treeSeed) });
  }
  things.sort((a, b) => a.y - b.y);
  for (const thing of things) thing.draw();
}

function drawHillTree(drawing: Drawing, at: { x: number; base: number; depth: number }, seed: number): void {
  const random = makeRandom(seed);
  const heightPx = random.between(46, 100) * (0.95 - 0.5 * at.depth);
  drawTree(drawing, { x: at.x, base: at.base, heightPx, haze: 0.04 + 0.3 * at.depth }, random);
}

/** How a tree stands in the scene. */
interface TreePlace {
  readonly x: number;
  readonly base: number;
  readonly heightPx: number;
  /** 0 near to 1 lost in haze. */
  readonly haze: number;
}

const LEAVES: readonly Colour[] = [
  [92, 108, 62],
  [106, 118, 68],
  [78, 98, 62],
  [118, 118, 74],
  [84, 102, 78],
];

/** A crown built of lit and shaded leaf masses, from the far ones to the near; leaves come from the foliage texture. */
export function drawTree(drawing: Drawing, at: TreePlace, random: SeededRandom): void {
  const { x, base, heightPx: height, haze } = at;
  const colour = random.pick(LEAVES);
  const leaf = (factor: number) => css(blend(shade(colour, factor), HAZE, haze));
  const isSlim = random.chance(0.14);
  const width = height * (isSlim ? 0.3 : random.between(0.72, 1));
  const trunk = Math.max(2, height * 0.05);
  drawing.rect(x - trunk / 2, base - height * 0.45, trunk, height * 0.45, {
    fill: css(blend([74, 62, 50], HAZE, haze)),
    material: "timber",
  });
  const masses = Math.round(14 + height * 0.22);
  for (let mass = 0; mass < masses; mass++) {
    const angle = random.between(0, 2 * Math.PI);
    const reach = random.next() ** 0.6;
    const dx = Math.cos(angle) * reach * 0.44;
    const dy = Math.sin(angle) * reach * 0.36;
    // Light from the upper left; what is drawn first lies behind and in shade.
    const light = 0.62 + (0.34 * mass) / masses - 0.3 * dy - 0.26 * dx;
    const size = random.between(0.07, 0.15) * (0.75 + 0.4 * (1 - mass / masses));
    drawing.ellipse(x + dx * width, base - height * 0.6 + dy * height, width * size * 1.3, height * size, {
      fill: leaf(light),
      material: "foliage",
    });
  }
}

/** A church above the roofs, the harbour's landmark. */
export function drawChurch(drawing: Drawing, x: number, base: number): void {
  const stone = (factor: number) => css(blend(shade([188, 178, 160], factor), HAZE, 0.16));
  drawing.rect(x + 56, base - 150, 250, 150, { fill: stone(1), material: "rubbleFar" });
  drawing.polygon(
    [
      [x + 40, base - 146],
      [x + 90, base - 236],
      [x + 290, base - 236],
      [x + 318, base - 146],
    ],
    { fill: css(blend([104, 106, 112], HAZE, 0.16)), material: "slate" },
  );
  for (let window = 0; window < 5; window++) {
    const left = x + 82 + window * 43;
    drawing.path(`M${left} ${base - 34}V${base - 100}A9 12 0 0 1 ${left + 18} ${base - 100}V${base - 34}Z`, {
      fill: "#434c54",
    });
  }
  drawing.rect(x - 42, base - 372, 98, 372, { fill: stone(1.04), material: "rubbleFar" });
  drawing.rect(x + 28, base - 372, 28, 372, { fill: "#1c2028", opacity: 0.22 });
  for (const y of [base - 372, base - 250, base - 120])
    drawing.rect(x - 46, y - 5, 106, 9, { fill: stone(0.86), material: "plaster" });
  for (const dx of [-22, 14]) {
    drawing.path(`M${x + dx} ${base - 272}V${base - 330}A11 14 0 0 1 ${x + dx + 22} ${base - 330}V${base - 272}Z`, {
      fill: "#2c3238",
    });
    for (let slat = 0; slat < 6; slat++) drawing.rect(x + dx, base - 326 + slat * 9, 22, 2.4, { fill: "#6c6a62" });
  }
  drawing.ellipse(x + 7, base - 200, 25, 25, { fill: "#ece6d6" });
  drawing.ellipse(x + 7, base - 200, 22, 22, { fill: "#34424c" });
  drawing.line([x + 7, base - 200], [x + 7, base - 217], "#e8d9a4", 2.4);
  drawing.line([x + 7, base - 200], [x - 4, base - 193], "#e8d9a4", 2.4);
  drawing.polygon(
    [
      [x - 48, base - 374],
      [x + 7, base - 560],
      [x + 62, base - 374],
    ],
    { fill: css(blend([92, 96, 104], HAZE, 0.16)), material: "slate" },
  );
  drawing.polygon(
    [
      [x + 7, base - 560],
      [x + 62, base - 374],
      [x + 28, base - 374],
    ],
    { fill: "#12161e", opacity: 0.26 },
  );
  drawing.line([x + 7, base - 556], [x + 7, base - 604], "#4a4a46", 2.6);
  drawing.path(`M${x + 7} ${base - 596}l20 5l-20 6z`, { fill: "#c8a858" });
}
