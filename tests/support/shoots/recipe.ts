import type { ShotOrder } from "@/lib/sorting/types";
import type { FrameSize } from "@/scripts/demo/pose";
import type { ShootScene } from "./shoot-truth";

type Range = readonly [low: number, high: number];

/** Everything that makes one kind of shoot differ from another. */
export interface Recipe {
  readonly scene: ShootScene;
  /** Part of the scene's height that is sky. */
  readonly skyPart: number;
  readonly rows: number;
  readonly columns: number;
  readonly framesPerTile: Range;
  /** Fraction of the tile's side. */
  readonly overlapAcross: Range;
  readonly overlapDown: Range;
  readonly order: ShotOrder;
  readonly frameGapSeconds: Range;
  readonly moveGapSeconds: Range;
  /** Probability of a pause before a frame inside a stack, and how long. */
  readonly pauseChance: number;
  readonly pauseSeconds: Range;
  readonly hasFraction: boolean;
  /** Part of the frames that carry EXIF. */
  readonly exifPart: number;
  readonly bodies: 1 | 2;
  /** Body 2's clock minus body 1's. */
  readonly clockDifferenceSeconds: number;
  readonly clockJumps: number;
  readonly rollsOver: boolean;
  /** Deviation of a stack's aim and of a frame within its stack, fraction of the width. */
  readonly aimJitter: number;
  readonly frameJitter: number;
  readonly mostRollDeg: number;
  readonly missingTiles: number;
  readonly reshotTiles: number;
  readonly doubledTiles: number;
  readonly doubledFiles: number;
  readonly strays: number;
  readonly hasMarkers: boolean;
  readonly hasMovement: boolean;
  readonly lightDriftEv: number;
  readonly thinSeams: number;
  readonly portrait: 6 | 8 | null;
  /** Focal length in tile widths where the camera really turns about a point. */
  readonly sphereFocalWidths: number | null;
  readonly distortion: number;
  readonly shadingEv: number;
  readonly noiseLevels: number;
  readonly hasRawBeside: boolean;
  readonly exposureDeviations: number;
  readonly focalDeviations: number;
  readonly framingDeviations: number;
  readonly softFrames: number;
  readonly motionFrames: number;
  readonly softStacks: number;
  readonly isBracketed: boolean;
  /** Where the kind is about size. */
  readonly size: FrameSize | null;
}

export const PLAIN_RECIPE: Recipe = {
  scene: "landscape",
  skyPart: 0.2,
  rows: 3,
  columns: 6,
  framesPerTile: [6, 6],
  overlapAcross: [0.33, 0.33],
  overlapDown: [0.33, 0.33],
  order: { along: "rows", from: "top-left", turns: true },
  frameGapSeconds: [1, 2],
  moveGapSeconds: [8, 20],
  pauseChance: 0,
  pauseSeconds: [15, 60],
  hasFraction: true,
  exifPart: 1,
  bodies: 1,
  clockDifferenceSeconds: 0,
  clockJumps: 0,
  rollsOver: false,
  aimJitter: 0.002,
  frameJitter: 0.0003,
  mostRollDeg: 0,
  missingTiles: 0,
  reshotTiles: 0,
  doubledTiles: 0,
  doubledFiles: 0,
  strays: 0,
  hasMarkers: false,
  hasMovement: false,
  lightDriftEv: 0,
  thinSeams: 0,
  portrait: null,
  sphereFocalWidths: null,
  distortion: 0,
  shadingEv: 0.15,
  noiseLevels: 2.2,
  hasRawBeside: false,
  exposureDeviations: 0,
  focalDeviations: 0,
  framingDeviations: 0,
  softFrames: 0,
  motionFrames: 0,
  softStacks: 0,
  isBracketed: false,
  size: null,
};
