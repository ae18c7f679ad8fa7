import { applyChanges, ChangeConflict, type Change } from "@/lib/board/changes";
import type { CommandOf } from "@/lib/board/command-schema";
import { freeTake, LINES_MOST, othersAt, stackOf, stacksAt, type Place } from "@/lib/board/look-up";
import type { Board, BoardStack } from "@/lib/board/model";

/** A place may lie so many lines beyond the grid: further out is a slip of the hand, and all between would be holes. */
const BEYOND_MOST = 3;

type Placing = Pick<CommandOf<"place-stack">, "stackId" | "place" | "occupied" | "expect">;

export function planPlace(board: Board, { stackId, place, occupied, expect }: Placing): Change[] {
  const stack = stackOf(board, stackId);
  if (expect && (expect.row !== stack.row || expect.column !== stack.column || expect.take !== stack.take)) {
    throw new ChangeConflict("The stack has another place now.", stackId);
  }
  if (place === null) return stack.row === null ? [] : leavePlace(board, stack, { row: null, column: null, take: 1 });
  const there = stacksAt(board, place).filter(({ id }) => id !== stackId);
  if (stack.row === place.row && stack.column === place.column) return [];
  if (there.length === 0) return [...leavePlace(board, stack, { ...place, take: 1 }), ...growTo(board, place)];
  switch (occupied) {
    case "refuse":
      throw new ChangeConflict("Another stack has this place now.", there[0]?.id ?? stackId);
    case "take":
      return leavePlace(board, stack, { ...place, take: freeTake(there) }, false);
    case "swap":
      return planSwap(board, stack, there);
    case "push":
      return planPush(board, stack, place);
  }
}

/** Stacks leave the grid one after another, so that takes of one tile find each other gone. */
export function planTakeOut(board: Board, stackIds: readonly string[]): Change[] {
  let left = board;
  return stackIds.flatMap((stackId) => {
    const changes = planPlace(left, { stackId, place: null, occupied: "refuse" });
    left = applyChanges(left, changes);
    return changes;
  });
}

/** Both places' stacks change over, all takes of each. A stack without a place sends the others out of the grid. */
function planSwap(board: Board, stack: BoardStack, there: readonly BoardStack[]): Change[] {
  const target = { row: there[0]?.row ?? null, column: there[0]?.column ?? null };
  if (stack.row === null) {
    return [
      ...there.map((other) => placeChange(other, { row: null, column: null, take: 1 }, true)),
      placeChange(stack, { ...target, take: 1 }, true),
    ];
  }
  const own = [stack, ...othersAt(board, stack)];
  const back = { row: stack.row, column: stack.column };
  return [
    ...own.map((each) => placeChange(each, { ...target, take: each.take }, each.isChosenTake)),
    ...there.map((each) => placeChange(each, { ...back, take: each.take }, each.isChosenTake)),
  ];
}

/** The stacks from this place to the right go one column on, as far as the first free place. */
function planPush(board: Board, stack: BoardStack, place: Place): Change[] {
  const pushed: Change[] = [];
  let column = place.column;
  for (;;) {
    const there = stacksAt(board, { row: place.row, column }).filter(({ id }) => id !== stack.id);
    if (there.length === 0) break;
    for (const each of there) {
      pushed.push(placeChange(each, { row: place.row, column: column + 1, take: each.take }, each.isChosenTake));
    }
    column += 1;
  }
  const own = leavePlace(board, stack, { ...place, take: 1 });
  return [...pushed, ...own, ...growTo(board, { row: place.row, column })];
}

/** A stack goes elsewhere; where it was the chosen take, the next one is chosen. */
function leavePlace(
  board: Board,
  stack: BoardStack,
  to: { row: number | null; column: number | null; take: number },
  isChosenTake = true,
): Change[] {
  const next = othersAt(board, stack).sort((a, b) => a.take - b.take)[0];
  const own = placeChange(stack, to, isChosenTake);
  if (!stack.isChosenTake || !next) return [own];
  return [own, { on: "stack", id: next.id, before: { isChosenTake: false }, after: { isChosenTake: true } }];
}

function placeChange(
  stack: BoardStack,
  to: { row: number | null; column: number | null; take: number },
  isChosenTake: boolean,
): Change {
  const { row, column, take, placedBy, confidence, reason } = stack;
  return {
    on: "stack",
    id: stack.id,
    before: { row, column, take, isChosenTake: stack.isChosenTake, placedBy, confidence, reason },
    after: { ...to, isChosenTake, placedBy: "person", confidence: 1, reason: "Placed by a person." },
  };
}

export function planTake(board: Board, stack: BoardStack): Change[] {
  if (stack.isChosenTake) return [];
  const others = othersAt(board, stack).filter(({ isChosenTake }) => isChosenTake);
  return [stack, ...others].map(({ id, isChosenTake }) => ({
    on: "stack",
    id,
    before: { isChosenTake },
    after: { isChosenTake: !isChosenTake },
  }));
}

export function planAddLine(board: Board, { axis, at }: CommandOf<"add-line">): Change[] {
  const lines = axis === "row" ? board.grid.rows : board.grid.columns;
  if (at > lines + 1) throw new ChangeConflict("There is no such line.", "grid");
  if (lines >= LINES_MOST) throw new ChangeConflict(`A grid has ${LINES_MOST} ${axis}s at the most.`, "");
  return [{ on: "line", axis, at, by: 1 }];
}

export function planRemoveLine(board: Board, { axis, at }: CommandOf<"remove-line">): Change[] {
  const lines = axis === "row" ? board.grid.rows : board.grid.columns;
  if (at > lines) throw new ChangeConflict("There is no such line.", "grid");
  const held = board.stacks.find((stack) => stack[axis] === at);
  if (held) throw new ChangeConflict("Only an empty line can be removed. Move its stacks first.", held.id);
  return [{ on: "line", axis, at, by: -1 }];
}

/** @throws ChangeConflict where the place lies too far beyond the grid */
export function growTo(board: Board, place: Place | null): Change[] {
  if (place === null) return [];
  const { rows, columns } = board.grid;
  requireNear("row", rows, place.row);
  requireNear("column", columns, place.column);
  const after = { rows: Math.max(rows, place.row), columns: Math.max(columns, place.column) };
  return after.rows === rows && after.columns === columns ? [] : [{ on: "grid", before: { rows, columns }, after }];
}

function requireNear(axis: "row" | "column", lines: number, at: number): void {
  if (at <= lines) return;
  if (at > LINES_MOST) throw new ChangeConflict(`A grid has ${LINES_MOST} ${axis}s at the most.`, "");
  if (at <= lines + BEYOND_MOST) return;
  const most = `The grid has ${lines} ${axis}s. A place may lie at most ${BEYOND_MOST} ${axis}s beyond it.`;
  throw new ChangeConflict(`${most} Add ${axis}s first, or choose a nearer place.`, "");
}
