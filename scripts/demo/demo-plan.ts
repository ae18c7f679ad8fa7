import { SCENE_SIZE } from "./harbour/layout";
import type { FrameSize, Pose } from "./pose";
import { makeRandom, mixSeeds, type SeededRandom } from "./seeded-random";

export const DEMO_FRAME_SIZE: FrameSize = { widthPx: 1500, heightPx: 1000 };

const ROWS = 3;
const COLUMNS = 6;
/** A little over what is wanted, as a careful photographer aims. */
const OVERLAP = 0.36;
const THIN_OVERLAP = 0.21;
const HOLE = { row: 2, column: 5 };
/** This tile was aimed too far right: thin towards the tile before it, generous towards the one after. */
const THIN_AT = { row: 3, column: 5 };
const FRAMES_PER_TILE: readonly (readonly number[])[] = [
  [6, 6, 7, 6, 6, 6],
  [6, 6, 7, 7, 0, 7],
  [5, 4, 8, 7, 7, 6],
];
/** The counter rolls over to 0001, in a new folder, after so many frames. */
const FRAMES_BEFORE_ROLL_OVER = 47;
/** 18 April 2027, 09:41:12 by the camera's clock, two hours east of UTC. */
const START_MS = Date.UTC(2027, 3, 18, 9, 41, 12, 480);

export interface DemoFrame {
  /** Below the demo's directory, "/" between names. */
  readonly file: string;
  /** Rows and columns count from 1, top left; null: the stray. */
  readonly place: { readonly row: number; readonly column: number } | null;
  /** Deviation of the equivalent Gaussian beyond the lens's own, px; 0: sharp. */
  readonly softSigmaPx: number;
  readonly motion: { readonly lengthPx: number; readonly angleRad: number } | null;
  readonly pose: Pose;
  /** The camera's clock as if it were UTC, ms. */
  readonly localMs: number;
  /** Light of the morning against the first frame, stops. */
  readonly lightEv: number;
}

/** What the demo is known to hold, for a check of what the sorting finds. */
export interface DemoTruth {
  readonly rows: number;
  readonly columns: number;
  readonly size: FrameSize;
  readonly hole: { readonly row: number; readonly column: number };
  readonly thinSeam: {
    readonly row: number;
    readonly column: number;
    readonly side: "right";
    readonly overlap: number;
  };
  /** In the order taken. */
  readonly frames: readonly DemoFrame[];
}

/** By "row/column/frame of the tile": what went wrong. */
const FAULTS: Readonly<Record<string, Pick<DemoFrame, "softSigmaPx" | "motion">>> = {
  "1/2/3": { softSigmaPx: 1.6, motion: null },
  "2/4/7": { softSigmaPx: 6 / Math.sqrt(12), motion: { lengthPx: 6, angleRad: 0.3 } },
  "3/2/1": { softSigmaPx: 2.2, motion: null },
  "3/6/4": { softSigmaPx: 1.1, motion: null },
  "3/6/5": { softSigmaPx: 9 / Math.sqrt(12), motion: { lengthPx: 9, angleRad: 1.2 } },
};

function aimAt(row: number, column: number): Pose {
  const { widthPx, heightPx } = DEMO_FRAME_SIZE;
  const stepX = widthPx * (1 - OVERLAP);
  const stepY = heightPx * (1 - OVERLAP);
  const isThin = row === THIN_AT.row && column === THIN_AT.column;
  return {
    centreXPx:
      SCENE_SIZE.widthPx / 2 + (column - (COLUMNS + 1) / 2) * stepX + (isThin ? (OVERLAP - THIN_OVERLAP) * widthPx : 0),
    centreYPx: SCENE_SIZE.heightPx / 2 + (row - (ROWS + 1) / 2) * stepY,
    rollRad: 0,
    zoom: 1,
    distortion: 0,
    sphere: null,
  };
}

/** Turning at the end of each row, as one walks a grid by hand. */
function walkTiles(): { row: number; column: number; count: number }[] {
  return FRAMES_PER_TILE.flatMap((counts, line) => {
    const tiles = counts.map((count, i) => ({ row: line + 1, column: i + 1, count }));
    return (line % 2 === 0 ? tiles : tiles.reverse()).filter(({ count }) => count > 0);
  });
}

function jittered(pose: Pose, spreadPx: number, random: SeededRandom): Pose {
  return {
    ...pose,
    centreXPx: pose.centreXPx + random.normal() * spreadPx,
    centreYPx: pose.centreYPx + random.normal() * spreadPx,
  };
}

/** Decides every frame of the demo without drawing anything. */
export function planDemo(seed: number): DemoTruth {
  const random = makeRandom(mixSeeds(seed, 901));
  const frames: DemoFrame[] = [];
  let nowMs = START_MS;
  const take = (frame: Pick<DemoFrame, "place" | "softSigmaPx" | "motion" | "pose">) => {
    const lightEv = 0.06 * Math.sin((nowMs - START_MS) / 160_000);
    frames.push({ ...frame, file: fileName(frames.length), localMs: nowMs, lightEv });
  };
  const wait = (fromSeconds: number, toSeconds: number) => {
    nowMs += Math.round(random.between(fromSeconds, toSeconds) * 1000);
  };
  let rowBefore = 1;
  for (const { row, column, count } of walkTiles()) {
    if (row === 2 && rowBefore === 1) {
      // Between the rows a picture of the ground goes off by mistake, and a ferry has to pass.
      wait(6, 9);
      take({ place: null, softSigmaPx: 0, motion: null, pose: aimAt(1, 1) });
      wait(88, 104);
    }
    rowBefore = row;
    const aim = jittered(aimAt(row, column), 2.2, random);
    for (let i = 1; i <= count; i++) {
      const fault = FAULTS[`${row}/${column}/${i}`] ?? { softSigmaPx: 0, motion: null };
      take({ place: { row, column }, ...fault, pose: jittered(aim, 0.45, random) });
      if (i < count) wait(1, 2);
    }
    wait(8, 20);
  }
  return {
    rows: ROWS,
    columns: COLUMNS,
    size: DEMO_FRAME_SIZE,
    hole: HOLE,
    thinSeam: { row: THIN_AT.row, column: THIN_AT.column - 1, side: "right", overlap: THIN_OVERLAP },
    frames,
  };
}

function fileName(index: number): string {
  const isOver = index >= FRAMES_BEFORE_ROLL_OVER;
  const counter = isOver ? index - FRAMES_BEFORE_ROLL_OVER + 1 : 10_000 - FRAMES_BEFORE_ROLL_OVER + index;
  return `${isOver ? "101HARB" : "100HARB"}/HARB${String(counter).padStart(4, "0")}.JPG`;
}
