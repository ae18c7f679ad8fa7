import type { BoardIndex } from "@/lib/board/board-index";
import { askedSeams, misfitKey } from "@/lib/board/measured-questions";

/** An overlap to be printed on the shared edge of two tiles. */
export interface SeamMark {
  readonly key: string;
  /** Place of the left or upper tile of the two. */
  readonly row: number;
  readonly column: number;
  readonly side: "right" | "below";
  readonly names: readonly [string, string];
  readonly overlap: number | null;
  /** Under the overlap that the project wants. */
  readonly isSmall: boolean;
  /** An open question says that the pictures do not match here. */
  readonly isMisfit: boolean;
}

/** The marks by the row they are drawn in: the row of the left tile, or of the lower one. Only small ones and misfits unless all are asked for. */
export function seamMarksByRow(index: BoardIndex, isAll: boolean): ReadonlyMap<number, readonly SeamMark[]> {
  const byRow = new Map<number, SeamMark[]>();
  const misfits = askedSeams(index.board.questions);
  for (const seam of index.seams) {
    const { stackId, neighbourId, side, overlap } = seam;
    const tile = index.tileOfStack.get(stackId);
    const neighbour = index.tileOfStack.get(neighbourId);
    if (!tile || !neighbour || tile.row === null || tile.column === null) continue;
    const isSmall = overlap !== null && overlap < index.board.grid.overlapWanted;
    const isMisfit = misfits.has(misfitKey(seam));
    if (!isSmall && !isMisfit && !isAll) continue;
    const drawnIn = side === "right" ? tile.row : tile.row + 1;
    const mark: SeamMark = {
      key: `${stackId}-${neighbourId}`,
      row: tile.row,
      column: tile.column,
      side,
      names: [tile.name, neighbour.name],
      overlap,
      isSmall,
      isMisfit,
    };
    byRow.set(drawnIn, [...(byRow.get(drawnIn) ?? []), mark]);
  }
  return byRow;
}
