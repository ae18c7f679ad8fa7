import type { ShotOrder } from "@/lib/sorting/types";
import type { SeededRandom } from "@/scripts/demo/seeded-random";
import type { Recipe } from "./recipe";

type Change = Partial<Recipe>;

const CORNERS = ["top-left", "top-right", "bottom-left", "bottom-right"] as const;

/** Every walking order and corner: "walk-rows-turning-top-left" and so on, sixteen in all. */
const walks: Record<string, () => Change> = Object.fromEntries(
  (["rows", "columns"] as const).flatMap((along) =>
    [true, false].flatMap((turns) =>
      CORNERS.map((from) => {
        const order: ShotOrder = { along, from, turns };
        return [`walk-${along}-${turns ? "turning" : "straight"}-${from}`, () => ({ order, rows: 3, columns: 4 })];
      }),
    ),
  ),
);

const handheld: Change = { aimJitter: 0.012, frameJitter: 0.008, mostRollDeg: 2 };

/** What each kind of shoot changes from the plain one; the seed decides within it. */
const CHANGES: Record<string, (random: SeededRandom) => Change> = {
  clean: () => ({}),
  ...walks,
  city: () => ({ scene: "city" }),
  photograph: () => ({ scene: "photograph" }),
  handheld: () => handheld,
  bursts: () => ({ frameGapSeconds: [0.1, 0.1], moveGapSeconds: [3, 9], hasFraction: false }),
  pauses: () => ({ pauseChance: 0.08 }),
  "quick-moves": () => ({ frameGapSeconds: [1, 2], moveGapSeconds: [1, 2.2] }),
  "whole-seconds": () => ({ hasFraction: false, moveGapSeconds: [4, 10] }),
  "no-exif": () => ({ exifPart: 0 }),
  "some-exif": () => ({ exifPart: 0.7 }),
  "two-bodies": (random) => ({ bodies: 2, rows: 4, clockDifferenceSeconds: random.pick([-3605, -197, 61, 193, 7210]) }),
  "clock-jump": () => ({ clockJumps: 1 }),
  "roll-over": () => ({ rollsOver: true }),
  "missing-tiles": (random) => ({ missingTiles: random.whole(1, 3) }),
  "reshot-tiles": (random) => ({ reshotTiles: random.whole(1, 3) }),
  "doubled-tiles": () => ({ doubledTiles: 2 }),
  "doubled-files": () => ({ doubledFiles: 4 }),
  strays: (random) => ({ strays: random.whole(2, 4) }),
  "marker-frames": () => ({ hasMarkers: true }),
  "blank-sky": () => ({ skyPart: 0.56, rows: 4 }),
  movement: () => ({ hasMovement: true, skyPart: 0.3 }),
  "light-drift": (random) => ({ lightDriftEv: random.between(0.4, 1) }),
  "thin-seam": () => ({ thinSeams: 1 }),
  "thin-overlaps": () => ({ overlapAcross: [0.12, 0.17], overlapDown: [0.12, 0.17] }),
  portrait: (random) => ({ portrait: random.pick([6, 8] as const), columns: 7, rows: 2 }),
  spherical: (random) => ({ sphereFocalWidths: random.between(2.2, 4) }),
  distortion: (random) => ({ distortion: random.pick([-0.015, 0.01]), shadingEv: 0.5 }),
  shading: () => ({ shadingEv: 1.2 }),
  "raw-beside": () => ({ hasRawBeside: true }),
  "exposure-deviates": () => ({ exposureDeviations: 4 }),
  "focal-length-deviates": () => ({ focalDeviations: 3 }),
  "framing-deviates": () => ({ framingDeviations: 4 }),
  soft: () => ({ softFrames: 12 }),
  "motion-blur": () => ({ motionFrames: 8 }),
  "soft-handheld": () => ({ ...handheld, softFrames: 12 }),
  "soft-stack": () => ({ softStacks: 2 }),
  brackets: () => ({ isBracketed: true, framesPerTile: [3, 3] }),
  "one-to-twelve": () => ({ framesPerTile: [1, 12] }),
  "single-frames": () => ({ framesPerTile: [1, 1] }),
  "single-row": (random) => ({ rows: 1, columns: random.whole(4, 9) }),
  "single-column": (random) => ({ rows: random.whole(3, 6), columns: 1 }),
  "single-tile": () => ({ rows: 1, columns: 1 }),
  "big-grid": () => ({ rows: 20, columns: 20, framesPerTile: [2, 3], size: { widthPx: 360, heightPx: 240 } }),
  "tall-grid": () => ({ rows: 40, columns: 2, framesPerTile: [2, 3], size: { widthPx: 360, heightPx: 240 } }),
  nasty: (random) => ({
    ...handheld,
    scene: random.pick(["landscape", "city", "photograph"] as const),
    skyPart: random.between(0.2, 0.4),
    rows: random.whole(3, 4),
    columns: random.whole(4, 6),
    framesPerTile: [3, 8],
    overlapAcross: [0.25, 0.38],
    overlapDown: [0.25, 0.38],
    frameGapSeconds: [0.3, 2],
    moveGapSeconds: [1.5, 9],
    pauseChance: 0.03,
    hasFraction: random.chance(0.5),
    exifPart: 0.95,
    clockJumps: 1,
    rollsOver: true,
    missingTiles: 1,
    reshotTiles: 1,
    doubledFiles: 1,
    strays: 2,
    hasMovement: true,
    lightDriftEv: 0.3,
    thinSeams: 1,
    distortion: -0.006,
    shadingEv: 0.5,
    exposureDeviations: 1,
    framingDeviations: 1,
    softFrames: 5,
    motionFrames: 2,
  }),
};

export const SHOOT_KINDS: readonly string[] = Object.keys(CHANGES);

/** @throws where there is no such kind */
export function changesOf(kind: string, random: SeededRandom): Change {
  const change = CHANGES[kind];
  if (!change) throw new Error(`expected kind to be one of ${SHOOT_KINDS.join(", ")}; got ${kind}`);
  return change(random);
}
