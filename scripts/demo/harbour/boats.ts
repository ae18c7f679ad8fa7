import { makeRandom, mixSeeds, type SeededRandom } from "../seeded-random";
import { type Colour, css, shade } from "./colour";
import type { Drawing } from "./drawing";
import { QUAY_FOOT_Y, SCENE_SIZE, WATER_Y } from "./layout";

export interface Boat {
  readonly kind: "sloop" | "trawler" | "dinghy";
  readonly x: number;
  /** Where keel or water line stands. */
  readonly y: number;
  readonly scale: number;
  readonly leanDeg: number;
  readonly isMirrored: boolean;
  readonly seed: number;
}

const HULLS: readonly Colour[] = [
  [36, 62, 92],
  [150, 46, 40],
  [228, 224, 212],
  [40, 92, 84],
  [206, 158, 70],
  [52, 54, 58],
  [98, 134, 158],
];

/** Boats left lying on the foreshore by the tide; further down the beach is nearer to us, so larger. */
export function planStranded(seed: number): Boat[] {
  const random = makeRandom(mixSeeds(seed, 401));
  const boats: Boat[] = [];
  for (let x = 120; x < SCENE_SIZE.widthPx; x += random.between(170, 420)) {
    const part = random.next();
    boats.push({
      kind: random.pick(["sloop", "sloop", "trawler", "dinghy", "dinghy"]),
      x,
      y: QUAY_FOOT_Y + 26 + part * (WATER_Y - QUAY_FOOT_Y - 44),
      scale: 0.62 + 0.2 * part,
      leanDeg: random.between(5, 17) * (random.chance(0.5) ? 1 : -1),
      isMirrored: random.chance(0.5),
      seed: mixSeeds(seed, 402, boats.length),
    });
  }
  return boats.sort((a, b) => a.y - b.y);
}

/** Boats at their moorings in the channel. */
export function planAfloat(seed: number): Boat[] {
  const random = makeRandom(mixSeeds(seed, 403));
  const boats: Boat[] = [];
  for (let x = 330; x < SCENE_SIZE.widthPx - 100; x += random.between(520, 900)) {
    const part = random.next();
    boats.push({
      kind: random.pick(["sloop", "trawler", "sloop", "dinghy"]),
      x,
      y: WATER_Y + 80 + part * 250,
      scale: 0.9 + 0.42 * part,
      leanDeg: random.between(-1.2, 1.2),
      isMirrored: random.chance(0.5),
      seed: mixSeeds(seed, 404, boats.length),
    });
  }
  return boats.sort((a, b) => a.y - b.y);
}

/** @param part - "whole" on the ground, with keel; "afloat" down to the water line only; "mirrored" its picture in the water */
export function drawBoat(drawing: Drawing, boat: Boat, how: "whole" | "afloat" | "mirrored"): void {
  const part = how === "whole" ? "whole" : "afloat";
  const random = makeRandom(boat.seed);
  if (part === "whole")
    drawing.ellipse(boat.x + 20, boat.y + 4, 170 * boat.scale, 15 * boat.scale, { fill: "#15130f", opacity: 0.42 });
  drawing.placed(
    {
      x: boat.x,
      y: boat.y,
      turnDeg: boat.leanDeg,
      scale: boat.scale,
      isMirrored: boat.isMirrored,
      isUpsideDown: how === "mirrored",
    },
    () => {
      if (boat.kind === "sloop") drawSloop(drawing, part, random);
      else if (boat.kind === "trawler") drawTrawler(drawing, part, random);
      else drawDinghy(drawing, part, random);
    },
  );
}

function drawHull(
  drawing: Drawing,
  hull: { length: number; height: number; colour: Colour; part: "whole" | "afloat"; keel: number },
  random: SeededRandom,
): void {
  const { length, height, colour, part, keel } = hull;
  const half = length / 2;
  const deck = -height - (part === "whole" ? keel : 0);
  const line = part === "whole" ? -keel : 0;
  if (part === "whole") {
    const bottom = css(
      random.pick<Colour>([
        [118, 46, 40],
        [44, 62, 78],
        [52, 58, 50],
      ]),
    );
    drawing.path(
      `M${-half * 0.86} ${line}Q${-half * 0.5} ${-keel * 0.1} ${-half * 0.2} 0L${half * 0.34} 0Q${half * 0.7} ${-keel * 0.3} ${half * 0.9} ${line}Z`,
      { fill: bottom, material: "hull" },
    );
  }
  const side = `M${-half} ${deck + height * 0.04}Q${-half * 0.98} ${line - height * 0.3} ${-half * 0.88} ${line}L${half * 0.88} ${line}Q${half * 0.99} ${line - height * 0.5} ${half * 1.1} ${deck - height * 0.3}Q${half * 0.2} ${deck + height * 0.22} ${-half} ${deck + height * 0.04}Z`;
  drawing.path(side, { fill: css(colour), material: "hull" });
  drawing.path(
    `M${-half * 0.98} ${deck + height * 0.26}Q${half * 0.2} ${deck + height * 0.42} ${half * 1.06} ${deck - height * 0.08}L${half * 1.04} ${deck + height * 0.02}Q${half * 0.2} ${deck + height * 0.52} ${-half * 0.97} ${deck + height * 0.36}Z`,
    { fill: css(shade(colour, colour[0] > 180 ? 0.6 : 1.7)) },
  );
  drawing.path(
    `M${-half * 0.9} ${line - height * 0.1}L${half * 0.9} ${line - height * 0.1}L${half * 0.88} ${line}L${-half * 0.88} ${line}Z`,
    { fill: "#15171a", opacity: 0.5 },
  );
  drawing.curve(
    `M${-half} ${deck + height * 0.04}Q${half * 0.2} ${deck + height * 0.22} ${half * 1.1} ${deck - height * 0.3}`,
    "#c8b894",
    3.2,
  );
  const shading = drawing.verticalGradient("hullShade", [
    [0, "#fff8e8", 0.2],
    [0.45, "#808080", 0],
    [1, "#0c0e14", 0.46],
  ]);
  drawing.path(side, { fill: shading, opacity: 0.99 });
  for (let plank = 0.42; plank < 0.95; plank += 0.14) {
    drawing.curve(
      `M${-half * 0.95} ${deck + height * plank}Q${half * 0.2} ${deck + height * (plank + 0.16)} ${half * 1.0} ${deck + height * (plank - 0.24)}`,
      css(shade(colour, 0.72)),
      0.9,
    );
  }
  for (let streak = 0; streak < 14; streak++) {
    const x = random.between(-half * 0.8, half * 0.8);
    drawing.rect(x, deck + height * 0.5, random.between(1.5, 4), random.between(0.15, 0.4) * height, {
      fill: "#6a4a30",
      opacity: random.between(0.1, 0.3),
    });
  }
}

function drawSloop(drawing: Drawing, part: "whole" | "afloat", random: SeededRandom): void {
  const length = random.between(270, 330);
  const keel = 46;
  const height = 44;
  const lift = part === "whole" ? keel : 0;
  const deck = -height - lift;
  const mast = random.between(430, 540);
  drawHull(drawing, { length, height, colour: random.pick(HULLS), part, keel }, random);
  drawing.path(`M-66 ${deck + 4}L-56 ${deck - 20}L44 ${deck - 24}L66 ${deck}Z`, { fill: "#e6e0d0", material: "hull" });
  for (const x of [-40, -8, 22]) drawing.ellipse(x, deck - 10, 9, 5, { fill: "#2c343a" });
  drawRig(drawing, { mast, deck, length }, random);
  const sail = random.pick(["#d8d2c2", "#3e5a78", "#8c3a32", "#cfc4a8"]);
  drawing.path(
    `M-112 ${deck - 44}Q-40 ${deck - 66} 18 ${deck - 48}L18 ${deck - 36}Q-50 ${deck - 34} -112 ${deck - 36}Z`,
    { fill: sail },
  );
  for (let tie = -96; tie < 14; tie += 20) drawing.line([tie, deck - 54], [tie + 1, deck - 35], "#3c3a36", 1.4);
  drawing.line([-118, deck - 36], [22, deck - 36], "#b8a478", 4);
}

function drawRig(drawing: Drawing, rig: { mast: number; deck: number; length: number }, random: SeededRandom): void {
  const { mast, deck, length } = rig;
  const top = deck - mast;
  const wood = random.pick(["#c0a070", "#d8d8d2", "#a88858"]);
  drawing.line([24, deck], [24, top], wood, 5.4);
  drawing.line([25.6, deck], [25.6, top], "#5c5244", 1.5);
  for (const part of [0.42, 0.72]) {
    drawing.line(
      [24 - 34 * (1.2 - part), top + mast * (1 - part)],
      [24 + 34 * (1.2 - part), top + mast * (1 - part) - 2],
      wood,
      2.6,
    );
  }
  const wire = "#35373a";
  drawing.line([24, top + 4], [length * 0.54, deck - 10], wire, 1.4);
  drawing.line([24, top + 4], [-length * 0.49, deck], wire, 1.3);
  drawing.line([24, top + mast * 0.28], [-20, deck], wire, 1.1);
  drawing.line([24, top + mast * 0.28], [74, deck], wire, 1.1);
  drawing.curve(`M24 ${top + 6}L${24 - 16} ${top + mast * 0.3}L-4 ${deck}`, wire, 1);
  drawing.curve(`M24 ${top + 6}L${24 + 16} ${top + mast * 0.3}L58 ${deck}`, wire, 1);
  drawing.line([30, top + 10], [36, deck - 4], "#d8d4c8", 1);
  drawing.path(`M24 ${top - 2}l${random.between(16, 26)} 4l-${random.between(12, 20)} 6z`, {
    fill: random.pick(["#b83a30", "#e0b040", "#2e5c8a"]),
  });
}

function drawTrawler(drawing: Drawing, part: "whole" | "afloat", random: SeededRandom): void {
  const length = random.between(330, 400);
  const keel = 34;
  const height = 66;
  const lift = part === "whole" ? keel : 0;
  const deck = -height - lift + 8;
  const trim = random.pick<Colour>([
    [232, 226, 212],
    [216, 196, 150],
    [198, 212, 214],
  ]);
  drawHull(drawing, { length, height, colour: random.pick(HULLS), part, keel }, random);
  drawing.rect(-132, deck - 78, 104, 84, { fill: css(trim), material: "hull" });
  drawing.rect(-138, deck - 88, 120, 11, { fill: css(shade(trim, 0.66)), material: "hull" });
  for (const x of [-124, -90, -58]) {
    drawing.rect(x, deck - 68, 25, 25, { fill: "#2c363e" });
    drawing.polygon(
      [
        [x, deck - 68],
        [x + 15, deck - 68],
        [x, deck - 50],
      ],
      { fill: "#9fb4c0", opacity: 0.6 },
    );
  }
  drawing.rect(-52, deck - 78, 24, 84, { fill: "#14161a", opacity: 0.2 });
  drawing.rect(-112, deck - 122, 18, 36, { fill: "#4a4e50", material: "hull" });
  drawing.line([-70, deck - 88], [-70, deck - 250], "#d8d4c6", 5);
  drawing.line([74, deck], [74, deck - 214], "#c8a468", 6);
  drawing.line([74, deck - 60], [-10, deck - 176], "#b8945c", 4.4);
  drawing.line([74, deck - 60], [150, deck - 156], "#b8945c", 4);
  const wire = "#333538";
  const ends = [
    [-70, -246, 180, -30],
    [-70, -246, -170, 0],
    [74, -210, 186, -30],
    [74, -210, -66, -200],
    [74, -210, -10, -176],
    [74, -210, 150, -156],
    [150, -156, 150, -20],
    [-10, -176, -12, -30],
  ] as const;
  for (const [x1, y1, x2, y2] of ends) drawing.line([x1, deck + y1], [x2, deck + y2], wire, 1.3);
  for (let float = 0; float < 14; float++) {
    drawing.ellipse(random.between(0, 130), deck - random.between(0, 24), 8, 8, {
      fill: random.pick(["#d8702e", "#c85a28", "#e4dcc8", "#3e7a86", "#d8b03c"]),
    });
  }
  for (const x of [-150, -30, 60, 140])
    drawing.ellipse(x, deck + 34, 10, 14, { fill: random.pick(["#e0ded4", "#d8702e", "#2e3c4c"]) });
  drawing.ellipse(-82, deck - 24, 12, 12, { fill: "#d85a34" });
  drawing.ellipse(-82, deck - 24, 6, 6, { fill: css(trim) });
}

function drawDinghy(drawing: Drawing, part: "whole" | "afloat", random: SeededRandom): void {
  const length = random.between(120, 160);
  drawHull(drawing, { length, height: 26, colour: random.pick(HULLS), part, keel: 12 }, random);
  const deck = -26 - (part === "whole" ? 12 : 0);
  drawing.line([-30, deck + 4], [54, deck - 14], "#c8a878", 3);
  drawing.line([-44, deck + 4], [30, deck - 12], "#b89868", 3);
  if (random.chance(0.4)) drawing.rect(-length / 2 - 8, deck - 14, 14, 24, { fill: "#33383c" });
}

/** Buoys, posts and chains: what shows only when the water is out. */
export function drawForeshoreThings(drawing: Drawing, seed: number): void {
  const random = makeRandom(mixSeeds(seed, 405));
  for (let i = 0; i < 70; i++) {
    const x = random.between(0, SCENE_SIZE.widthPx);
    const y = random.between(QUAY_FOOT_Y + 16, WATER_Y - 12);
    const size = random.between(5, 12) * (0.7 + (y - QUAY_FOOT_Y) / 400);
    drawing.ellipse(x + 4, y + size * 0.7, size * 1.5, size * 0.4, { fill: "#14120e", opacity: 0.4 });
    if (random.chance(0.5)) {
      drawing.ellipse(x, y, size, size, { fill: random.pick(["#d8642c", "#d8b43a", "#e4e0d4", "#b83a34"]) });
      drawing.ellipse(x - size * 0.3, y - size * 0.35, size * 0.3, size * 0.24, { fill: "#ffffff", opacity: 0.5 });
    } else {
      drawing.ellipse(x, y, size * 1.5, size * 0.8, {
        fill: random.pick(["#5c5648", "#4a4a42", "#6c6250"]),
        material: "rubble",
      });
    }
  }
  for (let i = 0; i < 36; i++) {
    const x = random.between(0, SCENE_SIZE.widthPx);
    const y = random.between(QUAY_FOOT_Y + 20, WATER_Y - 30);
    const reach = random.between(120, 360);
    drawing.curve(
      `M${x} ${y}q${reach * 0.3} ${random.between(4, 26)} ${reach * 0.6} ${random.between(0, 10)}t${reach * 0.4} ${random.between(6, 40)}`,
      random.pick(["#4a3c30", "#6a5a44", "#3c4a34"]),
      random.between(2, 3.4),
    );
  }
}

/** Mooring buoys and withies in the channel, each with its own water line. */
export function drawWaterMarks(drawing: Drawing, seed: number): void {
  const random = makeRandom(mixSeeds(seed, 406));
  for (let i = 0; i < 26; i++) {
    const x = random.between(0, SCENE_SIZE.widthPx);
    const y = random.between(WATER_Y + 24, SCENE_SIZE.heightPx - 20);
    const size = 7 + (9 * (y - WATER_Y)) / 500;
    if (random.chance(0.3)) {
      drawing.line([x, y], [x + random.between(-8, 8), y - size * 12], "#54483a", 4);
      continue;
    }
    drawing.path(`M${x - size} ${y}a${size} ${size} 0 0 1 ${2 * size} 0z`, {
      fill: random.pick(["#d8642c", "#d8b43a", "#e4e0d4", "#b83a34"]),
    });
    drawing.ellipse(x - size * 0.3, y - size * 0.6, size * 0.26, size * 0.18, { fill: "#ffffff", opacity: 0.5 });
  }
}
