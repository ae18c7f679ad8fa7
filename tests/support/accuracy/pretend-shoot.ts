import type { PairMeasure } from "@/lib/analysis/types";
import { walkLabel } from "@/lib/sorting/walks";
import type { MeasurePair, ShotOrder, SortFacts, SortFrame, SortInput, SortOptions } from "@/lib/sorting/types";

/** One frame of a shoot that is made of numbers only: where the camera pointed, when, and how sharp it was. */
export interface PretendFrame {
  readonly name: string;
  readonly folder: string | null;
  readonly seconds: number | null;
  /** Corner of the frame in the scene, px; null: it shows something else. */
  readonly at: { readonly xPx: number; readonly yPx: number } | null;
  readonly isBlank: boolean;
  /** Log ratio of its sharpness to the usual. */
  readonly sharpness: number;
  readonly serial: string | null;
}

export const PRETEND_SIZE = { widthPx: 3000, heightPx: 2000 };

export const NO_FACTS: SortFacts = { stacks: [], looseFrameIds: [], setAside: {}, settledQuestionKeys: [] };

export const PRETEND_OPTIONS: SortOptions = {
  overlapWanted: 0.25,
  framesPerTile: { least: 3, most: 12 },
  longestPauseSeconds: null,
  expectedRows: null,
  expectedColumns: null,
  softLimit: -0.2,
};

export interface PretendPlan {
  readonly rows: number;
  readonly columns: number;
  readonly framesPerTile: number;
  readonly order: ShotOrder;
  readonly overlap?: number;
  readonly isBlank?: (row: number, column: number) => boolean;
  readonly isMissing?: (row: number, column: number) => boolean;
}

const BOX_FROM_ONE = (plan: PretendPlan) => ({ top: 1, left: 1, bottom: plan.rows, right: plan.columns });
const FIRST_NUMBER = 101;

/** A tidy shoot: 1 s between frames, 10 s between tiles, numbers from 101. */
export function pretendShoot(plan: PretendPlan): PretendFrame[] {
  const step = 1 - (plan.overlap ?? 1 / 3);
  const frames: PretendFrame[] = [];
  let seconds = 0;
  for (let index = 0; index < plan.rows * plan.columns; index++) {
    const { row, column } = walkLabel(plan.order, index, BOX_FROM_ONE(plan));
    if (plan.isMissing?.(row, column)) continue;
    for (let shot = 0; shot < plan.framesPerTile; shot++) {
      seconds += shot === 0 ? 10 : 1;
      frames.push({
        name: `FRAM${String(FIRST_NUMBER + frames.length).padStart(4, "0")}`,
        folder: null,
        seconds,
        at: {
          xPx: (column - 1) * step * PRETEND_SIZE.widthPx + (shot % 3),
          yPx: (row - 1) * step * PRETEND_SIZE.heightPx - (shot % 2),
        },
        isBlank: plan.isBlank?.(row, column) ?? false,
        sharpness: 0,
        serial: "123",
      });
    }
  }
  return frames;
}

/** The frame's identity is what it shows and when, not its name: as with a hash of its bytes. */
function idOf(frame: PretendFrame, index: number): string {
  return `id-${frame.at?.xPx ?? "x"}-${frame.at?.yPx ?? "y"}-${index}`;
}

const START_MS = Date.UTC(2026, 4, 1, 9, 0, 0);

export function toSortFrame(frame: PretendFrame, index: number): SortFrame {
  const local = frame.seconds === null ? null : START_MS + frame.seconds * 1000;
  const value = Math.exp(frame.sharpness);
  const patches = Array.from({ length: 192 }, () => (frame.isBlank ? 1e-5 : 0.01) * value);
  return {
    id: idOf(frame, index),
    name: frame.name,
    folder: frame.folder,
    lastModifiedMs: null,
    metadata: {
      takenAt:
        local === null
          ? null
          : {
              local: new Date(local).toISOString().slice(0, 23),
              localMs: local,
              hasFraction: true,
              offsetMinutes: null,
            },
      make: frame.serial === null ? null : "Maker",
      model: frame.serial === null ? null : "Model",
      serial: frame.serial,
      lens: null,
      exposureSeconds: null,
      aperture: null,
      iso: null,
      focalLengthMm: null,
      orientation: 1,
    },
    measurements: {
      ...PRETEND_SIZE,
      laplacianVariance: 100 * value,
      meanBrightness: 120,
      texture: frame.isBlank ? 0.01 : 0.8,
      patches: { columns: 16, rows: 12, full: patches, half: patches, brightness: patches.map(() => 120) },
    },
  };
}

const LEAST_OVERLAP = 0.06;
const NO_MATCH: PairMeasure = { xPx: 311, yPx: 207, ncc: 0.05, peakRatio: 1.05, contrast: 4, ssim: 0.1 };
const PLAIN: PairMeasure = { xPx: 0, yPx: 0, ncc: 0.1, peakRatio: 1.02, contrast: 0.2, ssim: 0.98 };

/** Input and measurer of a pretended shoot. */
export function pretendInput(frames: readonly PretendFrame[]): {
  readonly input: SortInput;
  readonly measurePair: MeasurePair;
  readonly asked: () => number;
} {
  const sortFrames = frames.map(toSortFrame);
  const byId = new Map(sortFrames.map((frame, at) => [frame.id, frames[at]]));
  let asked = 0;
  const measurePair: MeasurePair = (aId, bId) => {
    asked++;
    const [a, b] = [byId.get(aId), byId.get(bId)];
    if (!a || !b) return Promise.reject(new Error(`no frame ${aId} or ${bId}`));
    return Promise.resolve(measure(a, b));
  };
  const input = { frames: sortFrames, facts: NO_FACTS, options: PRETEND_OPTIONS };
  return { input, measurePair, asked: () => asked };
}

function measure(a: PretendFrame, b: PretendFrame): PairMeasure {
  if (a.isBlank && b.isBlank) return PLAIN;
  if (!a.at || !b.at || a.isBlank || b.isBlank) return a === b ? { ...PLAIN, ncc: 1 } : NO_MATCH;
  const [xPx, yPx] = [b.at.xPx - a.at.xPx, b.at.yPx - a.at.yPx];
  const across = 1 - Math.abs(xPx) / PRETEND_SIZE.widthPx;
  const down = 1 - Math.abs(yPx) / PRETEND_SIZE.heightPx;
  if (across < LEAST_OVERLAP || down < LEAST_OVERLAP) return NO_MATCH;
  return { xPx, yPx, ncc: 0.85, peakRatio: 5, contrast: 4, ssim: across * down };
}
