import { ChangeConflict } from "@/lib/board/changes";
import type { Board, BoardFrame, BoardStack } from "@/lib/board/model";

/**
 * As many rows or columns as a grid may have. Shoots of the trade have up to 40 rows; a board of 200 x 200 is 40 000
 * places, which can still be shown, and listed in a manifest, within seconds.
 */
export const LINES_MOST = 200;

export interface Place {
  readonly row: number;
  readonly column: number;
}

export function stacksAt(board: Board, { row, column }: Place): BoardStack[] {
  return board.stacks.filter((stack) => stack.row === row && stack.column === column);
}

export function othersAt(board: Board, stack: BoardStack): BoardStack[] {
  if (stack.row === null || stack.column === null) return [];
  return stacksAt(board, { row: stack.row, column: stack.column }).filter(({ id }) => id !== stack.id);
}

export function freeTake(there: readonly BoardStack[]): number {
  return Math.max(0, ...there.map(({ take }) => take)) + 1;
}

export function framesOf(board: Board, stackId: string): BoardFrame[] {
  return board.frames.filter((frame) => frame.stackId === stackId).sort((a, b) => a.orderTaken - b.orderTaken);
}

export function frameOf(board: Board, id: string): BoardFrame {
  const frame = board.frames.find((each) => each.id === id);
  if (!frame) throw new ChangeConflict("There is no such frame in this project.", id);
  return frame;
}

/** @throws ChangeConflict where one of them is not there */
export function framesNamed(board: Board, ids: readonly string[]): BoardFrame[] {
  const byId = new Map(board.frames.map((frame) => [frame.id, frame]));
  return ids.map((id) => byId.get(id) ?? frameOf(board, id));
}

export function stackOf(board: Board, id: string): BoardStack {
  const stack = board.stacks.find((each) => each.id === id);
  if (!stack) throw new ChangeConflict("This stack is no longer there.", id);
  return stack;
}

export function sharpestInUse(frames: readonly BoardFrame[]): string | null {
  const inUse = frames.filter(({ setAside }) => setAside === null);
  // Within one stack the scores compare; among frames of several, the plain variance has to do.
  const score = (frame: BoardFrame) => frame.laplacianVariance;
  return (
    inUse.reduce<BoardFrame | null>((best, frame) => (best && score(best) >= score(frame) ? best : frame), null)?.id ??
    null
  );
}
