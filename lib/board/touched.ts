import type { Change } from "@/lib/board/changes";
import type { Board, BoardStack } from "@/lib/board/model";
import { tileName } from "@/lib/board/tile-name";

/**
 * Names of the tiles that changes touched, in the order of the grid: where frames were and are, where stacks were and
 * are. A line that comes or goes touches none: it renames them all.
 */
export function touchedTiles(before: Board, after: Board, changes: readonly Change[]): string[] {
  const places = new Map<string, { row: number; column: number }>();
  for (const board of [before, after]) {
    const stacks = new Map(board.stacks.map((stack) => [stack.id, stack]));
    for (const id of touchedStacks(board, changes)) {
      const { row = null, column = null } = stacks.get(id) ?? {};
      if (row !== null && column !== null) places.set(tileName(row, column), { row, column });
    }
  }
  return [...places].sort(([, a], [, b]) => a.row - b.row || a.column - b.column).map(([name]) => name);
}

/** Ids of the stacks that changes touch, by themselves or by a frame that lies in them on this board. */
function touchedStacks(board: Board, changes: readonly Change[]): Set<string> {
  const frameIds = new Set(changes.flatMap((change) => (change.on === "frame" ? [change.id] : [])));
  const ids = new Set(changes.flatMap(stackIdOf));
  if (frameIds.size === 0) return ids;
  for (const { id, stackId } of board.frames) if (stackId !== null && frameIds.has(id)) ids.add(stackId);
  return ids;
}

function stackIdOf(change: Change): string[] {
  if (change.on === "stack") return [change.id];
  return change.on === "new-stack" || change.on === "no-stack" ? [change.stack.id] : [];
}

/**
 * Stacks of the board after whose frames, reference or frames in use are others than before: what is measured within
 * them no longer holds.
 */
export function stacksToMeasure(before: Board, after: Board): string[] {
  const framesBefore = new Map(before.frames.map((frame) => [frame.id, frame]));
  const stacksBefore = new Map(before.stacks.map((stack) => [stack.id, stack]));
  const ids = new Set<string>();
  for (const frame of after.frames) {
    const was = framesBefore.get(frame.id);
    if (was === frame || (was?.stackId === frame.stackId && was.setAside === frame.setAside)) continue;
    for (const id of [was?.stackId ?? null, frame.stackId]) if (id !== null) ids.add(id);
  }
  const isOther = (stack: BoardStack) => stacksBefore.get(stack.id)?.referenceId !== stack.referenceId;
  return after.stacks.filter((stack) => ids.has(stack.id) || isOther(stack)).map(({ id }) => id);
}

/** Whether stacks lie otherwise to each other: what fits beside what may be another thing then. */
export function areNeighboursOther(before: Board, after: Board): boolean {
  const was = new Map(before.stacks.map((stack) => [stack.id, stack]));
  return (
    before.stacks.length !== after.stacks.length ||
    after.stacks.some((stack) => {
      const old = was.get(stack.id);
      const { row, column, isChosenTake } = stack;
      return old !== stack && (old?.row !== row || old.column !== column || old.isChosenTake !== isChosenTake);
    })
  );
}
