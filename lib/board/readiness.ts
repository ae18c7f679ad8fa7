import { isSetAside, type BoardIndex } from "@/lib/board/board-index";
import type { BoardSeam } from "@/lib/board/model";
import { countOf, percent } from "@/lib/board/words";
import { SET_ASIDE_REASONS, type SetAsideReason } from "@/lib/sorting/types";

/** One thing that is missing or unsettled before the sets are handed over. */
export interface OpenPoint {
  readonly kind: "questions" | "holes" | "few" | "seams" | "loose" | "unplaced" | "unreadable";
  readonly text: string;
  /** What it means for the merge. */
  readonly meaning: string;
  /** Tile to look at on the board; null: the page of the point itself. */
  readonly tile: string | null;
}

/** What is missing or unsettled, worst first; empty: nothing is. */
export function openPoints(index: BoardIndex): OpenPoint[] {
  const { board, holes, loose, unplaced } = index;
  const few = [...index.tiles.values()].filter((tile) => tile.isFew);
  const small = index.seams.filter((seam) => seam.overlap !== null && seam.overlap < board.grid.overlapWanted);
  const points: (OpenPoint | null)[] = [
    point(holes.size, {
      kind: "holes",
      text: `${countOf(holes.size, "hole")}: ${listed([...holes.keys()])}`,
      meaning: `${percent(sum([...holes.values()].map((hole) => hole.lostShare)))} of one tile's area is in no frame.`,
      tile: null,
    }),
    point(board.questions.length, {
      kind: "questions",
      text: countOf(board.questions.length, "open question"),
      meaning: "Stackyard is not sure; its best guess is in the manifest.",
      // The board's docket walks through all of them.
      tile: null,
    }),
    point(unplaced.length, {
      kind: "unplaced",
      text: `${countOf(unplaced.length, "stack")} without a place`,
      meaning: "In the manifest with no row and column.",
      tile: unplaced[0]?.name ?? null,
    }),
    point(few.length, {
      kind: "few",
      text: `${countOf(few.length, "tile")} with fewer frames than wanted: ${listed(few.map((tile) => tile.name))}`,
      meaning: `The project wants ${board.grid.framesPerTile.least} in use; fewer means more noise there.`,
      tile: few[0]?.name ?? null,
    }),
    point(small.length, {
      kind: "seams",
      text: `${countOf(small.length, "small overlap")}: ${listed(small.map((seam) => seamName(index, seam)))}`,
      meaning: `Under the ${percent(board.grid.overlapWanted)} that the project wants.`,
      tile: index.tileOfStack.get(small[0]?.stackId ?? "")?.name ?? null,
    }),
    point(loose.length, {
      kind: "loose",
      text: countOf(loose.length, "loose frame"),
      meaning: "In no stack, so in no merge; listed in the manifest all the same.",
      tile: "loose",
    }),
    point(board.unreadable.length, {
      kind: "unreadable",
      text: `${countOf(board.unreadable.length, "file")} could not be read`,
      meaning: "Stored and listed with the reason, but on no tile.",
      tile: null,
    }),
  ];
  return points.filter((candidate) => candidate !== null);
}

/** Frames set aside, by reason, in the order of the reasons; reasons without any are left out. */
export function setAsideCounts(index: BoardIndex): { readonly reason: SetAsideReason; readonly count: number }[] {
  return SET_ASIDE_REASONS.map((reason) => ({
    reason,
    count: index.board.frames.filter((frame) => isSetAside(frame) && frame.setAside === reason).length,
  })).filter(({ count }) => count > 0);
}

function seamName(index: BoardIndex, seam: BoardSeam): string {
  const names = [seam.stackId, seam.neighbourId].map((id) => index.tileOfStack.get(id)?.name ?? "no place");
  return `${names.join("–")} ${percent(seam.overlap)}`;
}

const MOST_LISTED = 8;

function listed(names: readonly string[]): string {
  const rest = names.length - MOST_LISTED;
  return rest > 0 ? `${names.slice(0, MOST_LISTED).join(", ")} and ${rest} more` : names.join(", ");
}

function point(count: number, open: OpenPoint): OpenPoint | null {
  return count > 0 ? open : null;
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
