import type { SeededRandom } from "../seeded-random";
import { type Colour, css, shade } from "./colour";
import type { Drawing, Material } from "./drawing";
import type { House } from "./houses";

export type RoofKind = "eaves" | "hip" | "gable" | "stepped" | "bell";

/** Houses on the hill are narrower than any along the quay. */
const FAR_WIDTH_PX = 150;

const isSlate = (colour: Colour) => colour[2] > colour[0] - 8;

/** Draws what stands above the wall: roof or gable, chimneys, dormers. */
export function drawRoof(drawing: Drawing, house: House, random: SeededRandom): void {
  const isFar = house.width < FAR_WIDTH_PX;
  const material: Material = isSlate(house.roofColour) ? "slate" : isFar ? "roofTileFar" : "roofTile";
  const rise = house.width * random.between(0.34, 0.5);
  drawChimneys(drawing, house, rise, random);
  if (house.roof === "eaves" || house.roof === "hip") {
    const height = Math.min(rise, 128);
    const inset = house.roof === "hip" ? height * 0.8 : 6;
    const { left, width, eaves } = house;
    drawing.polygon(
      [
        [left - 8, eaves],
        [left + inset, eaves - height],
        [left + width - inset, eaves - height],
        [left + width + 8, eaves],
      ],
      { fill: css(house.roofColour), material, variant: random.whole(0, 255) },
    );
    drawing.rect(left + inset - 2, eaves - height - 3, width - 2 * inset + 4, 6, {
      fill: css(shade(house.roofColour, 0.78)),
    });
    if (house.width > 150) drawDormers(drawing, house, height, random);
    return;
  }
  drawGable(drawing, house, { rise, material }, random);
}

function gableOutline(house: House, rise: number): [number, number][] {
  const { left, width, eaves, roof } = house;
  const middle = left + width / 2;
  if (roof === "stepped") {
    const steps = 5;
    const points: [number, number][] = [[left, eaves]];
    for (let step = 0; step < steps; step++) {
      const x = left + (width / 2) * (step / steps) * 0.86;
      points.push([x, eaves - (rise * step) / steps - 14], [x, eaves - (rise * (step + 1)) / steps]);
      points.push([left + (width / 2) * ((step + 1) / steps) * 0.86, eaves - (rise * (step + 1)) / steps]);
    }
    return [...points, ...[...points].reverse().map(([x, y]): [number, number] => [2 * middle - x, y])];
  }
  if (roof === "bell") {
    const half: [number, number][] = [];
    for (let i = 0; i <= 12; i++) {
      const t = i / 12;
      const reach =
        t < 0.55
          ? 1 - 0.55 * Math.sin((t / 0.55) * (Math.PI / 2))
          : 0.45 * Math.cos(((t - 0.55) / 0.45) * (Math.PI / 2));
      half.push([middle - (width / 2) * Math.max(0.08, reach), eaves - rise * 1.1 * t]);
    }
    return [...half, ...[...half].reverse().map(([x, y]): [number, number] => [2 * middle - x, y])];
  }
  return [
    [left - 3, eaves],
    [middle, eaves - rise],
    [left + width + 3, eaves],
  ];
}

function drawGable(
  drawing: Drawing,
  house: House,
  shape: { rise: number; material: Material },
  random: SeededRandom,
): void {
  const outline = gableOutline(house, shape.rise);
  const middle = house.left + house.width / 2;
  const spread = (amount: number) =>
    outline.map(([x, y]): [number, number] => [x + Math.sign(x - middle) * amount, y - amount * 0.9]);
  const coping = house.roof === "gable" ? house.roofColour : house.trim;
  drawing.polygon(spread(8), {
    fill: css(shade(coping, 0.86)),
    material: house.roof === "gable" ? shape.material : "plaster",
  });
  drawing.polygon(outline, { fill: css(house.wall), material: house.wallMaterial, variant: random.whole(0, 255) });
  const top = Math.min(...outline.map(([, y]) => y));
  drawing.ellipse(middle, (top + house.eaves) / 2 + 8, house.width * 0.06, house.width * 0.07, {
    fill: css(house.trim),
    material: "plaster",
  });
  drawing.ellipse(middle, (top + house.eaves) / 2 + 8, house.width * 0.04, house.width * 0.05, { fill: "#2a3036" });
  drawing.rect(middle - 1, (top + house.eaves) / 2 + 8 - house.width * 0.05, 2, house.width * 0.1, {
    fill: css(house.trim),
  });
}

function drawChimneys(drawing: Drawing, house: House, rise: number, random: SeededRandom): void {
  const count = house.width > 150 ? random.whole(1, 3) : random.whole(0, 1);
  for (let i = 0; i < count; i++) {
    const width = house.width * random.between(0.07, 0.11) + 6;
    const x = house.left + random.between(0.08, 0.86) * house.width;
    const height = Math.min(rise, 128) + random.between(14, 44);
    const top = house.eaves - height;
    const brick = shade([142, 92, 74], random.between(0.85, 1.1) * (house.width > 150 ? 1 : 1.15));
    drawing.rect(x, top, width, height, { fill: css(brick), material: "brick" });
    drawing.rect(x + width * 0.62, top, width * 0.38, height, { fill: "#181a22", opacity: 0.3 });
    drawing.rect(x - 3, top - 5, width + 6, 7, { fill: css(shade(brick, 0.8)) });
    const pots = Math.max(1, Math.floor(width / 11));
    for (let pot = 0; pot < pots; pot++) {
      drawing.rect(x + 2 + pot * (width / pots), top - 18, width / pots - 4, 14, {
        fill: css(shade([176, 112, 82], random.between(0.8, 1.1))),
      });
    }
    if (random.chance(0.3) && house.width > 150) drawAerial(drawing, x + width / 2, top - 16, random);
  }
}

function drawAerial(drawing: Drawing, x: number, y: number, random: SeededRandom): void {
  const height = random.between(34, 60);
  drawing.line([x, y], [x, y - height], "#3c4044", 1.8);
  for (let rod = 0; rod < 5; rod++) {
    const reach = 14 - 1.6 * rod;
    drawing.line([x - reach, y - height + 4 + rod * 4], [x + reach, y - height + 2 + rod * 4], "#4a4e52", 1.1);
  }
}

function drawDormers(drawing: Drawing, house: House, height: number, random: SeededRandom): void {
  const count = Math.floor(house.width / 110);
  for (let i = 0; i < count; i++) {
    if (random.chance(0.25)) continue;
    const width = 40;
    const x = house.left + (house.width / count) * (i + 0.5) - width / 2;
    const base = house.eaves - height * 0.14;
    const top = base - height * 0.52;
    drawing.polygon(
      [
        [x + width, base],
        [x + width + 16, base],
        [x + width, top],
      ],
      { fill: "#16181e", opacity: 0.34 },
    );
    drawing.rect(x, top, width, base - top, { fill: css(house.trim), material: "plaster" });
    drawing.rect(x + 6, top + 7, width - 12, base - top - 12, { fill: "#39434c" });
    drawing.rect(x + 6, top + 7, width - 12, (base - top - 12) * random.between(0.2, 0.6), {
      fill: "#7f97a8",
      opacity: 0.55,
    });
    drawing.rect(x + width / 2 - 1.2, top + 7, 2.4, base - top - 12, { fill: css(house.trim) });
    drawing.rect(x + 6, (top + base) / 2 - 1, width - 12, 2.2, { fill: css(house.trim) });
    drawing.polygon(
      [
        [x - 6, top + 2],
        [x + width / 2, top - 20],
        [x + width + 6, top + 2],
      ],
      { fill: css(shade(house.roofColour, 0.88)), material: "slate" },
    );
  }
}
