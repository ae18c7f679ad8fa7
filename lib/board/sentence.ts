import type { CommandOf, PlannedCommand } from "@/lib/board/command-schema";
import type { Board, BoardStack } from "@/lib/board/model";
import { withPresentNames } from "@/lib/board/present-names";
import { rowLetters, tileName } from "@/lib/board/tile-name";
import { countOf } from "@/lib/board/words";

/** What a sentence is made from: the board before and after, and what people are called. */
export interface Telling {
  readonly before: Board;
  readonly after: Board;
  readonly nameOf: (userId: string) => string;
}

/** What a command did, in plain words without the person's name: "moved HARB0019 from A3 to A4". */
export function describeCommand(command: PlannedCommand, telling: Telling): string {
  const { before, after } = telling;
  switch (command.type) {
    case "move-frames":
      return describeMove(command, telling);
    case "split-stack":
      return `split ${stackName(before, command.stackId)} at ${framesName(before, [command.atFrameId])}`;
    case "merge-stacks":
      return `merged ${stacksName(before, command.stackIds)} into ${stackName(before, command.intoStackId)}`;
    case "place-stack":
      return describePlace(command, telling);
    case "set-aside":
      return `set ${framesName(before, command.frameIds)} aside${inStacks(before, command.frameIds)} (${command.reason})`;
    case "bring-back":
      return `brought ${framesName(before, command.frameIds)} back${inStacks(before, command.frameIds)}`;
    case "choose-reference":
      return `made ${framesName(before, [command.frameId])} the reference of ${stackName(before, command.stackId)}`;
    case "choose-take":
      return `chose ${stackName(after, command.stackId, true)}`;
    case "add-line":
      return `added ${lineName(command)}`;
    case "remove-line":
      return `removed ${lineName(command)}`;
    case "settle":
      return describeSettling(command, before);
    case "assign": {
      const what = stacksName(before, command.stackIds);
      return command.userId === null ? `gave ${what} to nobody` : `gave ${what} to ${telling.nameOf(command.userId)}`;
    }
  }
}

function describeMove({ frameIds, to }: CommandOf<"move-frames">, { before, after }: Telling): string {
  const what = framesName(before, frameIds);
  const from = fromStacks(before, frameIds);
  if (to.kind === "loose") return `took ${what} out${from === "" ? " of every stack" : from.replace(" from ", " of ")}`;
  const isNew = to.kind === "new-stack";
  return `moved ${what}${from} to ${isNew ? "a new stack, " : ""}${stackName(after, to.stackId)}`;
}

function describePlace({ stackId, place, occupied }: CommandOf<"place-stack">, { before, after }: Telling): string {
  const from = stackName(before, stackId);
  if (place === null) return `took ${from} out of the grid`;
  const to = tileName(place.row, place.column);
  const wasFree = !before.stacks.some(({ id, row, column }) => id !== stackId && tileOf(row, column) === to);
  if (wasFree) return `moved ${from} to ${to}`;
  if (occupied === "swap") return `swapped ${from} and ${to}`;
  if (occupied === "push") return `moved ${from} to ${to} and shifted the rest of the row to the right`;
  return `moved ${from} to ${to} as take ${after.stacks.find(({ id }) => id === stackId)?.take ?? 1}`;
}

/** @param before - the board before the settling */
export function describeSettling({ target }: Pick<CommandOf<"settle">, "target">, before: Board): string {
  if (target.kind === "stack") {
    const what = stackName(before, target.stackId, false);
    return target.isSettled ? `settled ${what}` : `took the settled mark off ${what}`;
  }
  const question = withPresentNames(before).questions.find(({ id }) => id === target.questionId);
  const label = target.answer === null ? "Keep it as it is" : (question?.answers[target.answer]?.label ?? "");
  return `answered "${question?.message ?? ""}" with "${label}"`;
}

/** "undid: moved HARB0019 from A3 to A4"; of a step that is itself an undo, "redid: ...". */
export function describeUndo(sentence: string): string {
  if (sentence.startsWith(UNDONE)) return `${REDONE}${sentence.slice(UNDONE.length)}`;
  if (sentence.startsWith(REDONE)) return `${UNDONE}${sentence.slice(REDONE.length)}`;
  return `${UNDONE}${sentence}`;
}

const UNDONE = "undid: ";
const REDONE = "redid: ";

function framesName(board: Board, ids: readonly string[]): string {
  if (ids.length !== 1) return countOf(ids.length, "frame");
  return board.frames.find(({ id }) => id === ids[0])?.name ?? "a frame";
}

/** " from A3" where all come from one stack; "" where they come from several, or lay loose. */
function fromStacks(board: Board, frameIds: readonly string[]): string {
  const only = onlyStackOf(board, frameIds);
  return only === null ? "" : ` from ${stackName(board, only)}`;
}

function inStacks(board: Board, frameIds: readonly string[]): string {
  const only = onlyStackOf(board, frameIds);
  return only === null ? "" : ` in ${stackName(board, only)}`;
}

function onlyStackOf(board: Board, frameIds: readonly string[]): string | null {
  const asked = new Set(frameIds);
  const stackIds = new Set(board.frames.filter(({ id }) => asked.has(id)).map(({ stackId }) => stackId));
  const [only = null] = stackIds;
  return stackIds.size === 1 ? only : null;
}

function stacksName(board: Board, ids: readonly string[]): string {
  const [first, ...rest] = ids;
  if (first === undefined || rest.length > 1) return countOf(ids.length, "stack");
  return [first, ...rest].map((id) => stackName(board, id)).join(" and ");
}

/** "A3", "take 2 of A3", "a stack without a place". @param withTake - say the take even where it is the chosen one */
export function stackName(board: Board, id: string, withTake = false): string {
  const stack: BoardStack | undefined = board.stacks.find((each) => each.id === id);
  const tile = stack ? tileOf(stack.row, stack.column) : null;
  if (!stack || tile === null) return "a stack without a place";
  return withTake || !stack.isChosenTake ? `take ${stack.take} of ${tile}` : tile;
}

function tileOf(row: number | null, column: number | null): string | null {
  return row === null || column === null ? null : tileName(row, column);
}

function lineName({ axis, at }: { axis: "row" | "column"; at: number }): string {
  return axis === "row" ? `row ${rowLetters(at)}` : `column ${at}`;
}
