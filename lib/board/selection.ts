import { softLimit } from "@/lib/board/comb";
import type { BoardIndex } from "@/lib/board/board-index";
import type { BoardFrame } from "@/lib/board/model";

/** Everything between two frames of a list, both included, whichever comes first; only the second where the first is gone. */
export function rangeOf(order: readonly string[], fromId: string | null, toId: string): string[] {
  const to = order.indexOf(toId);
  const from = fromId === null ? -1 : order.indexOf(fromId);
  if (to < 0) return [];
  if (from < 0) return [toId];
  return order.slice(Math.min(from, to), Math.max(from, to) + 1);
}

/** Frames that are soft: set aside as soft, or in use and under the soft limit of their own stack. */
export function softFrames(index: BoardIndex): string[] {
  return [...index.framesOfStack.values()].flatMap((frames) => {
    const limit = softLimit(frames);
    return frames.filter((frame) => isSoft(frame, limit)).map(({ id }) => id);
  });
}

function isSoft({ setAside, relativeSharpness }: BoardFrame, limit: number): boolean {
  if (setAside !== null) return setAside === "soft";
  return relativeSharpness !== null && relativeSharpness < limit;
}

/** Frames of a row's tiles, or a column's, all takes. */
export function framesOfLine(index: BoardIndex, axis: "row" | "column", at: number): string[] {
  return [...index.tiles.values()]
    .filter((tile) => tile[axis] === at)
    .flatMap(({ takes }) => takes.flatMap(({ id }) => (index.framesOfStack.get(id) ?? []).map((frame) => frame.id)));
}

/** Frames of stacks that nobody has settled. */
export function framesNotSettled(index: BoardIndex): string[] {
  const open = new Set(index.board.stacks.filter(({ isSettled }) => !isSettled).map(({ id }) => id));
  return index.board.frames.filter(({ stackId }) => stackId !== null && open.has(stackId)).map(({ id }) => id);
}
