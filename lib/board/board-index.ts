import { currentSeams } from "@/lib/board/current-seams";
import type { Board, BoardFrame, BoardQuestion, BoardSeam, BoardStack } from "@/lib/board/model";
import { withPresentNames } from "@/lib/board/present-names";
import { tileName } from "@/lib/board/tile-name";

/** One stack as it is drawn: at its place in the grid, or without one. */
export interface BoardTile {
  /** A1, or "Stack 1" where it has no place. */
  readonly name: string;
  readonly row: number | null;
  readonly column: number | null;
  /** The chosen take. */
  readonly stack: BoardStack;
  /** All takes of the tile in order, the chosen one included. */
  readonly takes: readonly BoardStack[];
  /** Of the chosen take, in the order taken. */
  readonly frames: readonly BoardFrame[];
  readonly inUse: number;
  readonly reference: BoardFrame | null;
  readonly questions: readonly BoardQuestion[];
  /** Fewer in use than the project's least. */
  readonly isFew: boolean;
}

export interface BoardHole {
  readonly name: string;
  readonly row: number;
  readonly column: number;
  /** Share of the tile's area that no neighbour covers, 0 to 1. */
  readonly lostShare: number;
  readonly questions: readonly BoardQuestion[];
}

/** A board looked up by what the page asks for. */
export interface BoardIndex {
  /** With present names in all that it says. */
  readonly board: Board;
  readonly framesById: ReadonlyMap<string, BoardFrame>;
  readonly framesOfStack: ReadonlyMap<string, readonly BoardFrame[]>;
  readonly tiles: ReadonlyMap<string, BoardTile>;
  readonly holes: ReadonlyMap<string, BoardHole>;
  /** The tile that a stack belongs to, whichever take it is. */
  readonly tileOfStack: ReadonlyMap<string, BoardTile>;
  readonly unplaced: readonly BoardTile[];
  readonly loose: readonly BoardFrame[];
  /** Between the tiles that are neighbours now. */
  readonly seams: readonly BoardSeam[];
  /** Frames that an open question is about. */
  readonly askedFrames: ReadonlySet<string>;
}

/** Builds the look-ups once for a board. Pure; time grows with frames and places. */
export function indexBoard(stored: Board): BoardIndex {
  const board = withPresentNames(stored);
  const framesOfStack = groupBy(board.frames, (frame) => frame.stackId);
  const framesById = new Map(board.frames.map((frame) => [frame.id, frame]));
  const questionsOf = groupBy(board.questions, (question) => question.tile);
  const makeTile = (name: string, takes: readonly BoardStack[]): BoardTile => {
    const stack = takes.find((take) => take.isChosenTake) ?? first(takes);
    const frames = framesOfStack.get(stack.id) ?? [];
    const inUse = countInUse(frames);
    return {
      name,
      row: stack.row,
      column: stack.column,
      stack,
      takes,
      frames,
      inUse,
      reference: framesById.get(stack.referenceId ?? "") ?? frames[0] ?? null,
      questions: questionsOf.get(name) ?? [],
      isFew: inUse < board.grid.framesPerTile.least,
    };
  };
  const tiles = new Map<string, BoardTile>();
  for (const [name, takes] of groupBy(board.stacks, placeName)) {
    tiles.set(
      name,
      makeTile(
        name,
        [...takes].sort((a, b) => a.take - b.take),
      ),
    );
  }
  const unplaced = board.stacks
    .filter((stack) => stack.row === null || stack.column === null)
    .map((stack, at) => makeTile(`Stack ${at + 1}`, [stack]));
  const tileOfStack = new Map<string, BoardTile>();
  for (const tile of [...tiles.values(), ...unplaced]) {
    for (const take of tile.takes) tileOfStack.set(take.id, tile);
  }
  const seams = currentSeams(board);
  return {
    board,
    framesById,
    framesOfStack,
    tiles,
    holes: findHoles({ ...board, seams }, tiles, questionsOf),
    seams,
    tileOfStack,
    unplaced,
    loose: board.frames.filter((frame) => frame.stackId === null),
    askedFrames: findAskedFrames(board, framesOfStack),
  };
}

/** Left out of the merge of its stack. A frame in no stack is loose, whatever was measured of it. */
export function isSetAside({ stackId, setAside }: Pick<BoardFrame, "stackId" | "setAside">): boolean {
  return stackId !== null && setAside !== null;
}

export function countInUse(frames: readonly BoardFrame[]): number {
  return frames.filter((frame) => frame.setAside === null).length;
}

/** Median measured overlap of the seams to one side; the overlap that the project wants where none was measured. */
export function typicalOverlap(board: Pick<Board, "seams" | "grid">, side: "right" | "below"): number {
  const measured = board.seams.flatMap((seam) => (seam.side === side && seam.overlap !== null ? [seam.overlap] : []));
  return median(measured) ?? board.grid.overlapWanted;
}

/** Median of finite numbers; null of none. */
export function median(values: readonly number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)];
  const lower = sorted[Math.floor((sorted.length - 1) / 2)];
  return upper === undefined || lower === undefined ? null : (upper + lower) / 2;
}

/**
 * What of a missing tile no neighbour covers: width and height less the strip that each present neighbour overlaps.
 * @param overlap - across (left and right) and down (above and below), fractions of the tile's side
 * @param present - which of the four neighbours has a stack
 * @returns share of the tile's area, 0 to 1; with all four and one overlap o it is (1 - 2o) squared
 * Source: check-values.md E43 and 2.2 (1/3 gives 11.1 %, 1/4 gives 25 %, 1/2 gives 0).
 */
export function lostShare(
  overlap: { readonly across: number; readonly down: number },
  present: { readonly left: boolean; readonly right: boolean; readonly above: boolean; readonly below: boolean },
): number {
  const width = 1 - overlap.across * (Number(present.left) + Number(present.right));
  const height = 1 - overlap.down * (Number(present.above) + Number(present.below));
  return Math.max(0, width) * Math.max(0, height);
}

function findHoles(
  board: Board,
  tiles: ReadonlyMap<string, BoardTile>,
  questionsOf: ReadonlyMap<string, readonly BoardQuestion[]>,
): Map<string, BoardHole> {
  const holes = new Map<string, BoardHole>();
  const overlap = { across: typicalOverlap(board, "right"), down: typicalOverlap(board, "below") };
  const has = (row: number, column: number) => row > 0 && column > 0 && tiles.has(tileName(row, column));
  for (let row = 1; row <= board.grid.rows; row += 1) {
    for (let column = 1; column <= board.grid.columns; column += 1) {
      const name = tileName(row, column);
      if (tiles.has(name)) continue;
      const present = {
        left: has(row, column - 1),
        right: has(row, column + 1),
        above: has(row - 1, column),
        below: has(row + 1, column),
      };
      holes.set(name, {
        name,
        row,
        column,
        lostShare: lostShare(overlap, present),
        questions: questionsOf.get(name) ?? [],
      });
    }
  }
  return holes;
}

/** A question that names most of a stack is about the stack: it marks no single frame. */
function findAskedFrames(board: Board, framesOfStack: ReadonlyMap<string, readonly BoardFrame[]>): Set<string> {
  const framesById = new Map(board.frames.map((frame) => [frame.id, frame]));
  const asked = new Set<string>();
  for (const { frameIds } of board.questions) {
    for (const id of frameIds) {
      const stackId = framesById.get(id)?.stackId ?? null;
      const all = stackId === null ? Infinity : (framesOfStack.get(stackId)?.length ?? 0);
      if (frameIds.length <= all / 2 || frameIds.length === 1) asked.add(id);
    }
  }
  return asked;
}

function placeName(stack: BoardStack): string | null {
  return stack.row === null || stack.column === null ? null : tileName(stack.row, stack.column);
}

function groupBy<Item>(items: readonly Item[], keyOf: (item: Item) => string | null): Map<string, Item[]> {
  const groups = new Map<string, Item[]>();
  for (const item of items) {
    const key = keyOf(item);
    if (key === null) continue;
    const group = groups.get(key);
    if (group) group.push(item);
    else groups.set(key, [item]);
  }
  return groups;
}

function first<Item>(items: readonly Item[]): Item {
  const [item] = items;
  if (item === undefined) throw new RangeError("expected at least one item, got none");
  return item;
}
