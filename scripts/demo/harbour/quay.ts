import { makeRandom, mixSeeds, type SeededRandom } from "../seeded-random";
import { type Colour, css, shade } from "./colour";
import type { Drawing } from "./drawing";
import { drawTree } from "./hill";
import { HIGH_TIDE_Y, QUAY_FOOT_Y, QUAY_TOP_Y, SCENE_SIZE, STREET_Y } from "./layout";

const { widthPx } = SCENE_SIZE;

/** Street, wall and foreshore as plain surfaces; stones and weed come from the textures. */
export function drawQuay(drawing: Drawing, seed: number): void {
  const random = makeRandom(mixSeeds(seed, 301));
  drawing.rect(-10, STREET_Y, widthPx + 20, QUAY_TOP_Y - STREET_Y, { fill: "#aaa292", material: "paving" });
  drawing.rect(-10, STREET_Y, widthPx + 20, 7, { fill: "#1a1c22", opacity: 0.28 });
  drawing.rect(-10, QUAY_TOP_Y - 6, widthPx + 20, 22, { fill: "#c2b9a6", material: "paving" });
  drawing.rect(-10, QUAY_TOP_Y + 16, widthPx + 20, QUAY_FOOT_Y - QUAY_TOP_Y + 40, {
    fill: "#8f8674",
    material: "quayStone",
  });
  drawing.rect(-10, QUAY_TOP_Y + 16, widthPx + 20, 9, { fill: "#14161a", opacity: 0.4 });
  for (let x = 260; x < widthPx; x += random.between(420, 760)) drawSteps(drawing, x, random);
  for (let x = 90; x < widthPx; x += random.between(230, 420)) drawLadder(drawing, x);
  for (let x = 40; x < widthPx; x += random.between(120, 210)) drawMooringRing(drawing, x, random);
  for (let x = 30; x < widthPx; x += random.between(88, 140)) drawFender(drawing, x, random);
}

function drawSteps(drawing: Drawing, x: number, random: SeededRandom): void {
  const direction = random.chance(0.5) ? 1 : -1;
  const count = 15;
  for (let step = 0; step < count; step++) {
    const y = QUAY_TOP_Y + 18 + step * 15.5;
    const left = direction > 0 ? x + step * 20 : x - step * 20 - 64;
    const wet = y > HIGH_TIDE_Y ? 0.62 : 1;
    drawing.rect(left, y, 64, 5, { fill: css(shade([186, 176, 156], wet)), material: "paving" });
    drawing.rect(left, y + 5, 64, 11, { fill: css(shade([104, 98, 86], wet)), material: "rubble" });
  }
}

function drawLadder(drawing: Drawing, x: number): void {
  const bottom = QUAY_FOOT_Y + 4;
  drawing.rect(x + 7, QUAY_TOP_Y + 6, 30, bottom - QUAY_TOP_Y - 6, { fill: "#101214", opacity: 0.25 });
  for (const dx of [0, 24]) drawing.rect(x + dx, QUAY_TOP_Y - 14, 4, bottom - QUAY_TOP_Y + 14, { fill: "#4c3c32" });
  for (let y = QUAY_TOP_Y + 10; y < bottom; y += 15) drawing.rect(x, y, 28, 3, { fill: "#5a463a" });
}

function drawMooringRing(drawing: Drawing, x: number, random: SeededRandom): void {
  const y = QUAY_TOP_Y + random.between(46, 66);
  drawing.curve(`M${x} ${y}a8 9 0 1 0 0.1 0`, "#3a2e28", 3);
  drawing.line([x + 1, y + 18], [x + 2, y + random.between(40, 90)], "#6a4a34", 2.4);
}

function drawFender(drawing: Drawing, x: number, random: SeededRandom): void {
  if (random.chance(0.45)) return;
  const top = QUAY_TOP_Y + 22;
  if (random.chance(0.6)) {
    drawing.rect(x, QUAY_TOP_Y + 2, 15, QUAY_FOOT_Y - QUAY_TOP_Y - 20, { fill: "#5c4c3c", material: "timber" });
    drawing.rect(x + 11, QUAY_TOP_Y + 2, 4, QUAY_FOOT_Y - QUAY_TOP_Y - 20, { fill: "#14120f", opacity: 0.45 });
    return;
  }
  drawing.line([x, QUAY_TOP_Y], [x, top + 20], "#2c2a26", 2);
  drawing.ellipse(x, top + 34, 15, 15, { fill: "#26262a" });
  drawing.ellipse(x, top + 34, 7, 7, { fill: "#7a7262" });
}

/** What stands on the quay: lamps, bollards, nets and pots, benches, carts, trees and people. */
export function drawQuayLife(drawing: Drawing, seed: number): void {
  const random = makeRandom(mixSeeds(seed, 302));
  for (let x = 180; x < widthPx; x += random.between(430, 620)) drawLamp(drawing, x);
  for (let x = 330; x < widthPx; x += random.between(600, 1000)) {
    drawTree(drawing, { x, base: QUAY_TOP_Y - 22, heightPx: random.between(190, 250), haze: 0 }, random);
  }
  for (let x = 60; x < widthPx; x += random.between(130, 260)) drawBollard(drawing, x);
  for (let x = 20; x < widthPx; x += random.between(120, 330)) {
    const draw = random.pick([drawPots, drawNets, drawCrates, drawBench, drawRopes]);
    draw(drawing, x, random);
  }
  for (let x = 50; x < widthPx; x += random.between(46, 210))
    drawPerson(drawing, x, QUAY_TOP_Y - random.between(3, 24), random);
  for (let i = 0; i < 26; i++) drawGull(drawing, random);
}

function drawLamp(drawing: Drawing, x: number): void {
  const base = QUAY_TOP_Y - 8;
  drawing.rect(x - 3, base - 208, 6, 208, { fill: "#2a3236" });
  drawing.rect(x - 7, base - 30, 14, 30, { fill: "#232a2e" });
  drawing.rect(x - 1, base - 206, 2, 190, { fill: "#7c868a", opacity: 0.7 });
  drawing.rect(x - 17, base - 186, 34, 3, { fill: "#2a3236" });
  drawing.polygon(
    [
      [x - 13, base - 244],
      [x + 13, base - 244],
      [x + 8, base - 210],
      [x - 8, base - 210],
    ],
    { fill: "#dcd8c6" },
  );
  drawing.line([x, base - 244], [x, base - 210], "#2a3236", 1.6);
  drawing.polygon(
    [
      [x - 16, base - 244],
      [x, base - 260],
      [x + 16, base - 244],
    ],
    { fill: "#232a2e" },
  );
}

function drawBollard(drawing: Drawing, x: number): void {
  const base = QUAY_TOP_Y + 2;
  drawing.polygon(
    [
      [x + 10, base],
      [x + 34, base + 2],
      [x + 22, base - 6],
    ],
    { fill: "#14161a", opacity: 0.3 },
  );
  drawing.path(`M${x - 11} ${base}L${x - 8} ${base - 22}Q${x} ${base - 34} ${x + 8} ${base - 22}L${x + 11} ${base}Z`, {
    fill: "#33373a",
  });
  drawing.ellipse(x - 3, base - 22, 3, 5, { fill: "#7e868a", opacity: 0.6 });
  drawing.curve(`M${x - 9} ${base - 12}q9 6 18 0M${x - 10} ${base - 7}q10 6 20 0`, "#b8a884", 2.6);
}

function drawPots(drawing: Drawing, x: number, random: SeededRandom): void {
  const rows = random.whole(2, 4);
  const base = QUAY_TOP_Y - 10;
  const colour = random.pick<Colour>([
    [72, 104, 98],
    [150, 92, 52],
    [66, 76, 96],
    [110, 98, 70],
  ]);
  for (let row = 0; row < rows; row++) {
    for (let i = 0; i < 5 - row; i++) {
      const left = x + i * 34 + row * 16;
      const top = base - (row + 1) * 24;
      drawing.path(`M${left} ${top + 23}V${top + 11}Q${left + 15} ${top - 7} ${left + 31} ${top + 11}V${top + 23}Z`, {
        fill: css(shade(colour, random.between(0.45, 0.7))),
      });
      for (let mesh = 0; mesh < 6; mesh++) {
        drawing.line(
          [left + 2 + mesh * 5, top + 22],
          [left + 7 + mesh * 4, top + 5],
          css(shade(colour, random.between(1, 1.4))),
          1.1,
        );
      }
      drawing.line([left, top + 22], [left + 31, top + 22], "#3c342a", 2.2);
      drawing.curve(
        `M${left} ${top + 22}V${top + 11}Q${left + 15} ${top - 7} ${left + 31} ${top + 11}V${top + 22}`,
        "#8a7a5c",
        1.8,
      );
    }
  }
}

function drawNets(drawing: Drawing, x: number, random: SeededRandom): void {
  const base = QUAY_TOP_Y - 4;
  const width = random.between(80, 150);
  const colour = random.pick<Colour>([
    [44, 98, 92],
    [58, 84, 120],
    [142, 84, 52],
    [90, 108, 68],
  ]);
  drawing.path(
    `M${x} ${base}Q${x + width * 0.15} ${base - 34} ${x + width * 0.4} ${base - 30}Q${x + width * 0.6} ${base - 48} ${x + width * 0.8} ${base - 26}Q${x + width} ${base - 18} ${x + width} ${base}Z`,
    { fill: css(colour), material: "foliage" },
  );
  for (let float = 0; float < 10; float++) {
    const at = x + random.between(0.1, 0.9) * width;
    drawing.ellipse(at, base - random.between(4, 30), 4, 4, { fill: random.pick(["#d87a3a", "#e8e0d0", "#c8b040"]) });
  }
  for (let rope = 0; rope < 9; rope++) {
    const from = x + random.between(0, 0.6) * width;
    drawing.curve(
      `M${from} ${base - 5}q${width * 0.15} -${random.between(8, 30)} ${width * 0.3} -2`,
      css(shade(colour, 1.4)),
      1.2,
    );
  }
}

function drawCrates(drawing: Drawing, x: number, random: SeededRandom): void {
  const base = QUAY_TOP_Y - 6;
  for (let row = 0; row < random.whole(2, 4); row++) {
    for (let i = 0; i < 3; i++) {
      const colour = random.pick<Colour>([
        [176, 146, 100],
        [92, 124, 140],
        [186, 92, 62],
        [204, 196, 178],
      ]);
      const left = x + i * 44 + random.between(-2, 2);
      drawing.rect(left, base - (row + 1) * 22, 42, 21, { fill: css(shade(colour, 0.62)) });
      for (const dy of [1, 8, 15])
        drawing.rect(left, base - (row + 1) * 22 + dy, 42, 5, { fill: css(colour), material: "timber" });
    }
  }
}

function drawBench(drawing: Drawing, x: number): void {
  const base = QUAY_TOP_Y - 14;
  for (const dy of [34, 27, 16]) drawing.rect(x, base - dy, 86, 5, { fill: "#7a5a40", material: "timber" });
  for (const dx of [6, 74]) drawing.rect(x + dx, base - 34, 5, 34, { fill: "#2c2e30" });
}

function drawRopes(drawing: Drawing, x: number, random: SeededRandom): void {
  const base = QUAY_TOP_Y - 4;
  const colour = random.pick(["#c8b88c", "#5a86a0", "#d0d0c4"]);
  for (let turn = 0; turn < 6; turn++)
    drawing.curve(`M${x} ${base - turn * 3.4}a24 5 0 1 0 48 0a24 5 0 1 0 -48 0`, turn % 2 ? colour : "#8c8468", 2.6);
}

export function drawPerson(drawing: Drawing, x: number, base: number, random: SeededRandom): void {
  const height = random.between(62, 74);
  const coat = css(
    random.pick<Colour>([
      [58, 74, 104],
      [150, 52, 44],
      [62, 66, 60],
      [196, 180, 146],
      [216, 156, 58],
      [88, 104, 96],
      [40, 42, 48],
      [224, 222, 214],
    ]),
  );
  const trousers = css(
    random.pick<Colour>([
      [46, 52, 66],
      [72, 62, 52],
      [38, 38, 42],
      [104, 104, 102],
    ]),
  );
  const head = base - height;
  const stride = random.between(1, 9);
  drawing.polygon(
    [
      [x + 2, base - 1],
      [x + 46, base + 3],
      [x + 40, base - 3],
    ],
    { fill: "#14161a", opacity: 0.26 },
  );
  drawing.polygon(
    [
      [x - 6, base - 34],
      [x + 1, base - 34],
      [x - stride + 2, base],
      [x - stride - 5, base],
    ],
    { fill: trousers },
  );
  drawing.polygon(
    [
      [x - 1, base - 34],
      [x + 6, base - 34],
      [x + stride + 4, base],
      [x + stride - 3, base],
    ],
    { fill: trousers },
  );
  drawing.path(
    `M${x - 8} ${base - 30}L${x - 9} ${head + 18}Q${x} ${head + 9} ${x + 9} ${head + 18}L${x + 8} ${base - 30}Z`,
    { fill: coat },
  );
  drawing.rect(x + 3, head + 16, 5, height - 48, { fill: "#0e1014", opacity: 0.25 });
  drawing.line([x - 9, head + 20], [x - 11 - stride / 2, base - 32], coat, 5);
  drawing.line([x + 9, head + 20], [x + 10 + stride / 2, base - 34], coat, 5);
  drawing.ellipse(x, head + 6, 5, 6.4, { fill: random.pick(["#d8ac8c", "#b88466", "#8a5c44", "#e4bea0"]) });
  drawing.path(`M${x - 5.6} ${head + 5}a5.6 6 0 0 1 11.2 0z`, {
    fill: random.pick(["#2e241e", "#6a4a30", "#c8b48a", "#8a8a88", "#394660"]),
  });
}

function drawGull(drawing: Drawing, random: SeededRandom): void {
  const x = random.between(0, widthPx);
  const isStanding = random.chance(0.6);
  const y = isStanding ? QUAY_TOP_Y - 7 : random.between(520, 1350);
  if (isStanding) {
    drawing.path(`M${x} ${y}q7 -9 17 -5l6 -4q4 -1 4 3q-3 9 -12 10q-8 2 -15 -4z`, { fill: "#eeece6" });
    drawing.path(`M${x} ${y}q7 -7 16 -4q-4 7 -16 4z`, { fill: "#9aa2a8" });
    return;
  }
  const span = random.between(9, 20);
  drawing.curve(
    `M${x - span} ${y - span * 0.2}Q${x - span * 0.4} ${y - span * 0.45} ${x} ${y}Q${x + span * 0.4} ${y - span * 0.45} ${x + span} ${y - span * 0.25}`,
    "#f0eee8",
    2.2,
  );
  drawing.ellipse(x, y + 1, span * 0.22, 2, { fill: "#e4e2dc" });
}
