import { type FrameSize, type Pose, type Point, sceneToFrame } from "@/scripts/demo/pose";
import type { ShotOrder } from "@/lib/sorting/types";

export const SHOOT_SCENES = ["landscape", "city", "photograph"] as const;
export type ShootScene = (typeof SHOOT_SCENES)[number];

/** What is known of one frame because it was made. Rows and columns count from 1, top left. */
export interface FrameTruth {
  /** Below the shoot's directory, "/" between names. */
  readonly file: string;
  /** Index into `stacks`; null: belongs to no tile. */
  readonly stack: number | null;
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number | null;
  readonly stray: "ground" | "black" | "marker" | null;
  /** Deviation of the equivalent Gaussian beyond the lens's own, px at full size; 0: as sharp as the others. */
  readonly softSigmaPx: number;
  readonly isMotion: boolean;
  readonly deviation: "exposure" | "focal-length" | "framing" | null;
  /** Brightness against the shoot's first frame that comes from exposure or light, stops. */
  readonly gainEv: number;
  /** Byte-identical with this file. */
  readonly duplicateOf: string | null;
  /** Undecodable second file of the same exposure. */
  readonly rawFile: string | null;
  readonly hasExif: boolean;
  readonly body: number;
  /** True time, ms after the shoot's start; the body's clock may say otherwise. */
  readonly trueMs: number;
  readonly pose: Pose;
}

export interface StackTruth {
  readonly row: number;
  readonly column: number;
  readonly take: number;
  readonly files: readonly string[];
  /** Nothing but plain sky to see. */
  readonly isBlank: boolean;
  /** Every frame is soft. */
  readonly isSoft: boolean;
}

export interface SeamTruth {
  readonly row: number;
  readonly column: number;
  readonly side: "right" | "below";
  /** Fraction of the tile's side, between the middle poses of the two stacks (their last takes' poses are not used). */
  readonly overlap: number;
}

export interface ShootTruth {
  readonly kind: string;
  readonly seed: number;
  readonly scene: ShootScene;
  readonly rows: number;
  readonly columns: number;
  /** Size of a frame shown upright. */
  readonly size: FrameSize;
  /** Null with two bodies at work. */
  readonly shotOrder: ShotOrder | null;
  readonly stacks: readonly StackTruth[];
  /** In the order really taken; copies of files last. */
  readonly frames: readonly FrameTruth[];
  readonly seams: readonly SeamTruth[];
  readonly holes: readonly { readonly row: number; readonly column: number }[];
}

/**
 * Overlap of two frames, the second to the right of the first or below it.
 * @returns fraction of the frame's side, from how far the spot halfway between them moves from frame to frame
 */
export function overlapBetween(first: Pose, second: Pose, size: FrameSize, side: "right" | "below"): number {
  const shift = shiftBetween(first, second, size);
  return side === "right" ? 1 - shift.xPx / size.widthPx : 1 - shift.yPx / size.heightPx;
}

/** Where the second frame's corner lies in the first's pixels, judged at the spot halfway between their middles. */
export function shiftBetween(first: Pose, second: Pose, size: FrameSize): Point {
  const halfway = {
    xPx: (first.centreXPx + second.centreXPx) / 2,
    yPx: (first.centreYPx + second.centreYPx) / 2,
  };
  const inFirst = sceneToFrame(first, size, halfway);
  const inSecond = sceneToFrame(second, size, halfway);
  return { xPx: inFirst.xPx - inSecond.xPx, yPx: inFirst.yPx - inSecond.yPx };
}
