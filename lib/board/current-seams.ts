import { seamKey } from "@/lib/board/changes";
import type { Board, BoardSeam, BoardStack } from "@/lib/board/model";

/**
 * The seams as they count now: one between the chosen takes of every two places beside or below each other.
 * @returns in the order of rows and columns; `overlap` is null where it is not measured (yet), or was measured with the
 *   two lying otherwise
 */
export function currentSeams(board: Pick<Board, "stacks" | "seams">): BoardSeam[] {
  const measured = new Map(board.seams.map((seam) => [lyingSeamKey(seam), seam.overlap]));
  const chosen = board.stacks.filter((stack) => stack.isChosenTake && stack.row !== null && stack.column !== null);
  const at = new Map(chosen.map((stack) => [`${stack.row} ${stack.column}`, stack]));
  const inOrder = [...at.values()].sort(byPlace);
  return inOrder.flatMap((stack) => {
    const right = at.get(`${stack.row} ${(stack.column ?? 0) + 1}`);
    const below = at.get(`${(stack.row ?? 0) + 1} ${stack.column}`);
    return [...seamTo(stack, right, "right"), ...seamTo(stack, below, "below")].map((seam) => ({
      ...seam,
      overlap: measured.get(lyingSeamKey(seam)) ?? null,
    }));
  });
}

/** Of the current seams, those that nothing was measured of since the two came to lie so. */
export function unmeasuredSeams(board: Pick<Board, "stacks" | "seams">): BoardSeam[] {
  const measured = new Set(board.seams.map(lyingSeamKey));
  return currentSeams(board).filter((seam) => !measured.has(lyingSeamKey(seam)));
}

function seamTo(stack: BoardStack, neighbour: BoardStack | undefined, side: BoardSeam["side"]): BoardSeam[] {
  return neighbour ? [{ stackId: stack.id, neighbourId: neighbour.id, side, overlap: null }] : [];
}

/** A seam as it lies: measured with the two lying otherwise it says nothing. */
export function lyingSeamKey(seam: Pick<BoardSeam, "stackId" | "neighbourId" | "side">): string {
  return `${seamKey(seam)} ${seam.side}`;
}

function byPlace(a: BoardStack, b: BoardStack): number {
  return (a.row ?? 0) - (b.row ?? 0) || (a.column ?? 0) - (b.column ?? 0);
}
