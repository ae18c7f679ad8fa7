import { countInUse, type BoardIndex } from "@/lib/board/board-index";
import type { BoardFrame, BoardStack } from "@/lib/board/model";
import {
  framesMoved,
  nameOfStack,
  nameOfTarget,
  stackOfTarget,
  tileAt,
  type Moving,
  type Occupied,
  type Target,
} from "@/lib/board/moving";
import { rowLetters, tileName } from "@/lib/board/tile-name";
import { countOf } from "@/lib/board/words";

/** What putting something down would do, said before it is done. */
export interface Outcome {
  /** asks: a place that is taken, and what happens to its stack is not chosen yet. */
  readonly state: "possible" | "asks" | "impossible";
  /** For the tile's caption: "A4 would have 7 frames". */
  readonly caption: string;
  /** "It would go from A3 to A4. A4 would have 7 frames." */
  readonly sentence: string;
}

/** "HARB0019", "HARB0019 and HARB0020", "4 frames", "A4 (6 frames)". */
export function nameOfMoved(index: BoardIndex, moving: Moving): string {
  const frames = framesMoved(index, moving);
  if (moving.kind === "stack") return `${nameOfStack(index, moving.stackId)} (${countOf(frames.length, "frame")})`;
  return frames.length <= 2 ? frames.map(({ name }) => name).join(" and ") : countOf(frames.length, "frame");
}

/** What would happen. Pure; agrees with `planCommand` on the same board. */
export function outcomeOf(index: BoardIndex, moving: Moving, target: Target): Outcome {
  if (moving.kind === "stack" && target.kind !== "loose") return outcomeOfStack(index, moving.stackId, target);
  if (target.kind === "out") return impossible("Frames have no place of their own.");
  const to = stackOfTarget(index, target);
  const frames = framesMoved(index, moving).filter(({ stackId }) => to === undefined || stackId !== to);
  if (frames.length === 0) {
    const one = framesMoved(index, moving).length === 1;
    const there = to === null ? "loose" : `in ${nameOfTarget(index, target)}`;
    return impossible(`${one ? "It is" : "They are"} ${there} already.`);
  }
  const caption = captionOfFrames(index, frames, target, to);
  const it = frames.length === 1 ? "It" : "They";
  const where =
    to === null
      ? `would be taken out of ${fromNames(index, frames)} and be loose.`
      : `would go from ${fromNames(index, frames)} to ${newName(index, target, to)}.`;
  const growth = to === undefined && target.kind === "place" ? growthOf(index, target) : [];
  const sentences = [
    `${it} ${where}`,
    ...(to === null ? [] : [`${caption}.`]),
    ...growth,
    ...leftBehind(index, frames),
  ];
  return { state: "possible", caption, sentence: sentences.join(" ") };
}

function captionOfFrames(
  index: BoardIndex,
  frames: readonly BoardFrame[],
  target: Target,
  to: string | null | undefined,
): string {
  if (to === null) return `${countOf(index.loose.length + frames.length, "frame")} would be loose`;
  const count = frames.length + (to === undefined ? 0 : (index.framesOfStack.get(to)?.length ?? 0));
  const name = to === undefined && target.kind !== "place" ? "The new stack" : capital(nameOfTarget(index, target));
  return `${name} would have ${countOf(count, "frame")}`;
}

function newName(index: BoardIndex, target: Target, to: string | null | undefined): string {
  const name = nameOfTarget(index, target);
  if (to !== undefined || target.kind !== "place") return name;
  return `a new stack in ${name}`;
}

/** "A3", "A3 and A4", "3 tiles", "the loose frames". */
function fromNames(index: BoardIndex, frames: readonly BoardFrame[]): string {
  const names = new Set(
    frames.map(({ stackId }) => (stackId === null ? "the loose frames" : nameOfStack(index, stackId))),
  );
  return names.size <= 2 ? [...names].join(" and ") : `${names.size} places`;
}

/** Where frames leave: a stack that ends, or that has too few in use. At most two are named. */
function leftBehind(index: BoardIndex, leaving: readonly BoardFrame[]): string[] {
  const gone = new Set(leaving.map(({ id }) => id));
  const stackIds = [...new Set(leaving.flatMap(({ stackId }) => (stackId === null ? [] : [stackId])))];
  const said = stackIds.flatMap((stackId) => {
    const staying = (index.framesOfStack.get(stackId) ?? []).filter(({ id }) => !gone.has(id));
    if (staying.length === 0) return emptied(index, stackId);
    const inUse = countInUse(staying);
    const { least } = index.board.grid.framesPerTile;
    if (inUse >= least) return [];
    return [`${capital(nameOfStack(index, stackId))} would have ${inUse} in use, fewer than ${least}.`];
  });
  return said.length <= 2 ? said : [...said.slice(0, 1), `${said.length - 1} more would be left short or empty.`];
}

/** A stack without frames is no more: its place becomes a hole, or shows its next take. */
function emptied(index: BoardIndex, stackId: string): string[] {
  const tile = index.tileOfStack.get(stackId);
  if (!tile) return [];
  const name = nameOfStack(index, stackId);
  if (tile.row === null || tile.stack.id !== stackId) return [`${capital(name)} would be gone.`];
  const next = tile.takes.find(({ id }) => id !== stackId);
  return [next ? `${tile.name} would show take ${next.take}.` : `${tile.name} would be a hole.`];
}

function outcomeOfStack(index: BoardIndex, stackId: string, target: Target): Outcome {
  const tile = index.tileOfStack.get(stackId);
  const stack = tile?.takes.find(({ id }) => id === stackId);
  if (!tile || !stack) return impossible("This stack is no longer there.");
  const name = nameOfStack(index, stackId);
  if (target.kind === "out") {
    if (stack.row === null) return impossible("It has no place now.");
    return possible(`${capital(name)} would have no place`, [
      "It would be taken out of the grid.",
      ...leftPlace(index, stack),
    ]);
  }
  if (target.kind !== "place")
    return impossible("A stack goes to a place in the grid. Its frames can go into a stack.");
  const place = tileName(target.row, target.column);
  if (stack.row === target.row && stack.column === target.column) return impossible(`It is in ${place} already.`);
  const there = tileAt(index, target);
  if (!there) {
    return possible(`${capital(name)} would be placed in ${place}`, [
      `It would be placed in ${place}.`,
      ...growthOf(index, target),
      ...leftPlace(index, stack),
    ]);
  }
  if (target.occupied === undefined) {
    return {
      state: "asks",
      caption: `${place} is taken`,
      sentence: `${place} has a stack: what happens to it is asked.`,
    };
  }
  return outcomeOfTaken(index, stack, { row: target.row, column: target.column, occupied: target.occupied });
}

function outcomeOfTaken(
  index: BoardIndex,
  stack: BoardStack,
  target: { readonly row: number; readonly column: number; readonly occupied: Occupied },
): Outcome {
  const place = tileName(target.row, target.column);
  const name = nameOfStack(index, stack.id);
  if (target.occupied === "take") {
    const takes = tileAt(index, target)?.takes ?? [];
    const take = Math.max(0, ...takes.map((each) => each.take)) + 1;
    return possible(`${place} would have ${countOf(takes.length + 1, "take")}`, [
      `It would be take ${take} of ${place}, not in the merge until it is chosen.`,
      ...leftPlace(index, stack),
    ]);
  }
  if (target.occupied === "swap") {
    const back = stack.row === null || stack.column === null ? null : tileName(stack.row, stack.column);
    return possible(back === null ? `${place} would be ${name}` : `${back} and ${place} would change places`, [
      back === null
        ? `It would be placed in ${place}, and the stack there would have no place.`
        : `It would be placed in ${place}, and ${place} in ${back}.`,
    ]);
  }
  const { pushedTo, last } = pushedFrom(index, stack, target);
  const moved = last === target.column ? place : `${place} to ${tileName(target.row, last)}`;
  return possible(`${capital(name)} would be placed in ${place}`, [
    `It would be placed in ${place}.`,
    `${moved} would go one place to the right.`,
    ...growthOf(index, { row: target.row, column: last + 1 }),
    ...(pushedTo.includes(stack.column ?? 0) && stack.row === target.row ? [] : leftPlace(index, stack)),
  ]);
}

/** The unbroken line of stacks from a place to the right: the columns it would go to, and its last column now. */
function pushedFrom(index: BoardIndex, stack: BoardStack, from: { readonly row: number; readonly column: number }) {
  const pushedTo: number[] = [];
  let column = from.column;
  for (;;) {
    const takes = tileAt(index, { row: from.row, column })?.takes ?? [];
    if (takes.every(({ id }) => id === stack.id)) return { pushedTo, last: column - 1 };
    column += 1;
    pushedTo.push(column);
  }
}

/** What its old place is without it. */
function leftPlace(index: BoardIndex, stack: BoardStack): string[] {
  const tile = index.tileOfStack.get(stack.id);
  if (!tile || tile.row === null) return [];
  const next = tile.takes.find(({ id }) => id !== stack.id);
  if (!next) return [`${tile.name} would be a hole.`];
  return stack.isChosenTake ? [`${tile.name} would show take ${next.take}.`] : [];
}

/**
 * What a place far beyond the grid would make of it, where it would grow by more than one line: such a name is more
 * often a slip than a wish. Null: nothing to ask.
 */
export function growthToConfirm(index: BoardIndex, target: Target): string | null {
  if (target.kind !== "place") return null;
  const { rows, columns } = index.board.grid;
  const grown = { rows: Math.max(rows, target.row), columns: Math.max(columns, target.column) };
  if (grown.rows - rows <= 1 && grown.columns - columns <= 1) return null;
  const empty = grown.rows * grown.columns - rows * columns - 1;
  const said = [
    ...(grown.rows > rows ? [`from ${rows} to ${countOf(grown.rows, "row")}`] : []),
    ...(grown.columns > columns ? [`from ${columns} to ${countOf(grown.columns, "column")}`] : []),
  ];
  return `The grid would grow ${said.join(" and ")}; ${countOf(empty, "place")} would be empty.`;
}

function growthOf(index: BoardIndex, place: { readonly row: number; readonly column: number }): string[] {
  const { rows, columns } = index.board.grid;
  const lines = [
    ...(place.row > rows ? [`row ${rowLetters(place.row)}`] : []),
    ...(place.column > columns ? [`column ${place.column}`] : []),
  ];
  return lines.length === 0 ? [] : [`The grid would reach to ${lines.join(" and ")}.`];
}

function possible(caption: string, sentences: readonly string[]): Outcome {
  return { state: "possible", caption, sentence: sentences.join(" ") };
}

function impossible(sentence: string): Outcome {
  return { state: "impossible", caption: sentence.replace(/\.$/, ""), sentence };
}

/** "take 2 of A4" at the head of a sentence. */
function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
