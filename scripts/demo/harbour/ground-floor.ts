import type { SeededRandom } from "../seeded-random";
import { blend, type Colour, css, HAZE, shade } from "./colour";
import type { Drawing } from "./drawing";
import type { House } from "./houses";
import { drawWindow } from "./windows";

const DOORS: readonly Colour[] = [
  [62, 84, 78],
  [116, 52, 44],
  [52, 62, 92],
  [86, 66, 48],
  [40, 44, 46],
];
const AWNINGS: readonly (readonly [Colour, Colour])[] = [
  [
    [176, 60, 48],
    [232, 224, 208],
  ],
  [
    [54, 92, 98],
    [226, 222, 210],
  ],
  [
    [206, 160, 84],
    [240, 232, 214],
  ],
  [
    [70, 82, 110],
    [218, 220, 220],
  ],
];

/** Doors, shop fronts, arched store rooms: what stands at street level. */
export function drawGroundFloor(drawing: Drawing, house: House, random: SeededRandom): void {
  const { left, width, base } = house;
  drawing.rect(left, base - 132, width, 7, { fill: css(house.trim), material: "plaster" });
  drawing.rect(left, base - 125, width, 5, { fill: "#1a1c24", opacity: 0.3 });
  drawing.rect(left, base - 16, width, 16, { fill: css(blend(house.wall, [110, 104, 96], 0.7)), material: "rubble" });
  const kind = random.pick(["shop", "shop", "home", "home", "store"] as const);
  if (kind === "store") drawStore(drawing, house, random);
  else if (kind === "shop") drawShop(drawing, house, random);
  else drawHome(drawing, house, random);
}

function drawDoor(drawing: Drawing, x: number, base: number, random: SeededRandom): void {
  const colour = random.pick(DOORS);
  drawing.rect(x - 6, base - 112, 56, 112, { fill: "#cfc6b4", material: "plaster" });
  drawing.rect(x, base - 106, 44, 106, { fill: css(shade(colour, 0.6)) });
  drawing.rect(x, base - 106, 44, 18, { fill: "#4a565e" });
  drawing.rect(x + 2, base - 86, 40, 86, { fill: css(colour), material: "timber" });
  for (const [dx, dy] of [
    [7, 78],
    [24, 78],
    [7, 42],
    [24, 42],
  ] as const) {
    drawing.rect(x + dx, base - dy, 13, 30, { fill: css(shade(colour, 0.76)) });
  }
  drawing.ellipse(x + 38, base - 44, 2, 2, { fill: "#d8c48a" });
  drawing.rect(x, base - 106, 44, 7, { fill: "#101218", opacity: 0.5 });
  drawing.rect(x - 10, base - 5, 64, 6, { fill: "#a49c8e", material: "paving" });
}

function drawHome(drawing: Drawing, house: House, random: SeededRandom): void {
  const { left, width, base } = house;
  const doorAt = random.between(0.1, 0.75) * (width - 60) + 8;
  drawDoor(drawing, left + doorAt, base, random);
  const style = {
    widthPx: 42,
    heightPx: 62,
    frame: [234, 230, 220] as Colour,
    shutter: null,
    bars: { across: 2, down: 3 },
    hasSill: true,
    hasLintel: true,
    haze: 0,
    hazeColour: HAZE,
  };
  for (let x = 22; x < width - 56; x += 74) {
    if (Math.abs(x - doorAt) > 64) drawWindow(drawing, left + x, base - 104, style, random);
  }
  if (random.chance(0.5)) drawLantern(drawing, left + doorAt + 62, base - 96);
}

function drawLantern(drawing: Drawing, x: number, y: number): void {
  drawing.rect(x - 1.5, y - 14, 3, 12, { fill: "#24262a" });
  drawing.polygon(
    [
      [x - 8, y - 2],
      [x + 8, y - 2],
      [x + 5, y + 18],
      [x - 5, y + 18],
    ],
    { fill: "#d8cfa8" },
  );
  drawing.polygon(
    [
      [x - 10, y - 2],
      [x, y - 11],
      [x + 10, y - 2],
    ],
    { fill: "#24262a" },
  );
}

function drawShop(drawing: Drawing, house: House, random: SeededRandom): void {
  const { left, width, base } = house;
  const front = random.pick(DOORS);
  const from = left + 14;
  const span = width - 28;
  drawing.rect(from, base - 118, span, 118, { fill: css(shade(front, 1.15)), material: "timber" });
  const panes = Math.max(2, Math.round(span / 84));
  const door = random.whole(0, panes - 1);
  const pane = span / panes;
  for (let i = 0; i < panes; i++) {
    const x = from + i * pane + 6;
    const bottom = i === door ? 6 : 30;
    drawing.rect(x, base - 104, pane - 12, 104 - bottom, { fill: "#2e363c" });
    drawing.polygon(
      [
        [x, base - 104],
        [x + pane * 0.5, base - 104],
        [x, base - 40],
      ],
      { fill: "#9fb2be", opacity: 0.4 },
    );
    for (let thing = 0; thing < 9 && i !== door; thing++) {
      const height = random.between(6, 26);
      const colour = random.pick(["#c8b48c", "#a85a40", "#e4dcc8", "#62788a", "#7c8a5a", "#d8a048"]);
      drawing.rect(x + 4 + random.next() * (pane - 30), base - bottom - height, random.between(5, 14), height, {
        fill: colour,
      });
    }
    if (i === door) drawing.rect(x + pane - 24, base - 56, 3, 14, { fill: "#d8c48a" });
  }
  if (random.chance(0.55)) drawAwning(drawing, from - 6, base - 122, span + 12, random);
}

function drawAwning(drawing: Drawing, x: number, y: number, width: number, random: SeededRandom): void {
  const [first, second] = random.pick(AWNINGS);
  const stripes = Math.max(4, Math.round(width / 20));
  const stripe = width / stripes;
  drawing.rect(x + 8, y + 34, width, 26, { fill: "#14161c", opacity: 0.34 });
  for (let i = 0; i < stripes; i++) {
    const colour = i % 2 === 0 ? first : second;
    const left = x + i * stripe;
    drawing.polygon(
      [
        [left, y],
        [left + stripe, y],
        [left + stripe, y + 32],
        [left, y + 32],
      ],
      { fill: css(colour) },
    );
    drawing.ellipse(left + stripe / 2, y + 32, stripe / 2, 7, { fill: css(shade(colour, 0.86)) });
  }
  drawing.rect(x, y, width, 5, { fill: "#ffffff", opacity: 0.16 });
}

function drawStore(drawing: Drawing, house: House, random: SeededRandom): void {
  const { left, width, base } = house;
  const arches = Math.max(1, Math.floor(width / 130));
  const span = width / arches;
  for (let i = 0; i < arches; i++) {
    const x = left + i * span + span * 0.18;
    const reach = span * 0.64;
    const outer = `M${x - 8} ${base}V${base - 72}A${reach / 2 + 8} ${reach / 2 + 8} 0 0 1 ${x + reach + 8} ${base - 72}V${base}Z`;
    const inner = `M${x} ${base}V${base - 70}A${reach / 2} ${reach / 2} 0 0 1 ${x + reach} ${base - 70}V${base}Z`;
    drawing.path(outer, { fill: "#b4aa98", material: "rubble" });
    const isOpen = random.chance(0.3);
    drawing.path(inner, { fill: isOpen ? "#1c1e20" : css(random.pick(DOORS)), material: isOpen ? "smooth" : "timber" });
    if (isOpen) continue;
    drawing.rect(x + reach / 2 - 1, base - 110, 2, 110, { fill: "#1a1c1e" });
    drawing.rect(x + 6, base - 62, reach - 12, 4, { fill: "#2a2c2e" });
    drawing.rect(x + 6, base - 22, reach - 12, 4, { fill: "#2a2c2e" });
  }
}
