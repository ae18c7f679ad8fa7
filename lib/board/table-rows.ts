import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import { expectedNoise } from "@/lib/board/expected-noise";
import { leastOverlaps } from "@/lib/board/summary";
import { clockText } from "@/lib/board/words";

/** One tile or hole as the table lists it. Null: does not apply, or not measured. */
export interface TableRow {
  readonly name: string;
  readonly isHole: boolean;
  /** Row then column, for sorting by place; stacks without a place come last. */
  readonly place: number;
  readonly takenAt: string | null;
  readonly takenAtMs: number | null;
  readonly inUse: number | null;
  readonly frames: number | null;
  readonly isFew: boolean;
  /** Relative sharpness of the softest frame in use, 0 to 1. */
  readonly softest: number | null;
  /** Noise of the mean against one frame, 0 to 1. */
  readonly noise: number | null;
  readonly leastOverlap: number | null;
  readonly isOverlapSmall: boolean;
  readonly takes: number;
  readonly questions: number;
}

export const TABLE_COLUMNS = ["place", "takenAtMs", "inUse", "softest", "noise", "leastOverlap", "questions"] as const;
export type TableColumn = (typeof TABLE_COLUMNS)[number];
export interface TableOrder {
  readonly column: TableColumn;
  readonly isDescending: boolean;
}

/** More columns than any grid has. */
const PLACE_STRIDE = 100_000;

/** Every tile, hole and stack without a place, in the order asked for; what is not known always comes last. */
export function tableRows(index: BoardIndex, order: TableOrder): TableRow[] {
  const least = leastOverlaps(index);
  const wanted = index.board.grid.overlapWanted;
  const rows = [
    ...[...index.tiles.values(), ...index.unplaced].map((tile) => tileRow(tile, least.get(tile.name) ?? null, wanted)),
    ...[...index.holes.values()].map((hole) => ({
      ...EMPTY,
      name: hole.name,
      isHole: true,
      place: hole.row * PLACE_STRIDE + hole.column,
      questions: hole.questions.length,
    })),
  ];
  const sign = order.isDescending ? -1 : 1;
  return rows.sort((a, b) => compare(a[order.column], b[order.column], sign) || a.place - b.place);
}

const EMPTY = {
  isHole: false,
  takenAt: null,
  takenAtMs: null,
  inUse: null,
  frames: null,
  isFew: false,
  softest: null,
  noise: null,
  leastOverlap: null,
  isOverlapSmall: false,
  takes: 0,
  questions: 0,
} as const;

function tileRow(tile: BoardTile, leastOverlap: number | null, overlapWanted: number): TableRow {
  const takenAt = tile.frames[0]?.metadata.takenAt ?? null;
  const sharpness = tile.frames.flatMap((frame) =>
    frame.setAside === null && frame.relativeSharpness !== null ? [frame.relativeSharpness] : [],
  );
  return {
    name: tile.name,
    isHole: false,
    place: (tile.row ?? PLACE_STRIDE) * PLACE_STRIDE + (tile.column ?? 0),
    takenAt: clockText(takenAt?.local ?? null),
    takenAtMs: takenAt?.localMs ?? null,
    inUse: tile.inUse,
    frames: tile.frames.length,
    isFew: tile.isFew,
    softest: sharpness.length > 0 ? Math.min(...sharpness) : null,
    noise: tile.inUse > 0 ? expectedNoise(tile.inUse, "mean") : null,
    leastOverlap,
    isOverlapSmall: leastOverlap !== null && leastOverlap < overlapWanted,
    takes: tile.takes.length,
    questions: tile.questions.length,
  };
}

function compare(a: number | null, b: number | null, sign: number): number {
  if (a === null || b === null) return Number(a === null) - Number(b === null);
  return sign * (a - b);
}
