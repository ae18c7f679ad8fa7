import type { BoardIndex } from "@/lib/board/board-index";
import type { BoardFrame } from "@/lib/board/model";

export interface FoundFrame {
  readonly frame: BoardFrame;
  /** The tile that it lies in; null: it is loose. */
  readonly tile: string | null;
}

/**
 * Frames whose name holds what was typed, the likeliest first: the same name, then the same number ("19" is HARB0019),
 * then names that begin with it, end with it, hold it. Capitals do not matter.
 */
export function findFrames(index: BoardIndex, typed: string, most: number): FoundFrame[] {
  const wanted = typed.trim().toLowerCase();
  if (wanted === "") return [];
  const rated = index.board.frames.flatMap((frame) => {
    const rank = rankOf(frame.name.toLowerCase(), wanted);
    return rank === null ? [] : [{ frame, rank }];
  });
  rated.sort((a, b) => a.rank - b.rank || a.frame.orderTaken - b.frame.orderTaken);
  return rated.slice(0, most).map(({ frame }) => ({
    frame,
    tile: frame.stackId === null ? null : (index.tileOfStack.get(frame.stackId)?.name ?? null),
  }));
}

/** 0 is the likeliest; null: not this one. */
function rankOf(name: string, wanted: string): number | null {
  if (name === wanted) return 0;
  const number = /(\d+)\D*$/.exec(name)?.[1];
  if (number !== undefined && /^\d+$/.test(wanted) && Number(number) === Number(wanted)) return 1;
  if (name.startsWith(wanted)) return 2;
  if (name.endsWith(wanted)) return 3;
  return name.includes(wanted) ? 4 : null;
}
