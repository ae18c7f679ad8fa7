import type { PlannedCommand } from "@/lib/board/command-schema";
import type { Board, BoardStack } from "@/lib/board/model";
import { tileName } from "@/lib/board/tile-name";
import { countOf } from "@/lib/board/words";

/** As many names as a sentence bears; beyond, they are counted. */
const NAMES_MOST = 3;

/**
 * What a command does, in the past tense and in names of frames and tiles, without who did it:
 * "Moved HARB0019 from A3 to A4". Follows a person's name with its first letter small.
 * @param board - as it is before the command
 * @param nameOf - a member's name, for who merges what; null: unknown
 */
export function commandSentence(
  board: Board,
  command: PlannedCommand,
  nameOf: (userId: string) => string | null = () => null,
): string {
  switch (command.type) {
    case "move-frames":
      return moveSentence(board, command.frameIds, targetName(board, command.to));
    case "split-stack":
      return `Split ${stackName(board, command.stackId)} at ${frameName(board, command.atFrameId)}${atPlace(command.place)}`;
    case "merge-stacks":
      return `Merged ${namesOf(command.stackIds.map((id) => stackName(board, id)))} into ${stackName(board, command.intoStackId)}`;
    case "place-stack":
      return placeSentence(board, command);
    case "set-aside":
      return `Set ${framesText(board, command.frameIds)} aside: ${command.reason}`;
    case "bring-back":
      return `Brought ${framesText(board, command.frameIds)} back`;
    case "choose-reference":
      return `Chose ${frameName(board, command.frameId)} as the reference of ${stackName(board, command.stackId)}`;
    case "choose-take":
      return `Chose ${stackName(board, command.stackId)}`;
    case "add-line":
      return `Added ${lineName(command.axis, command.at)}`;
    case "remove-line":
      return `Removed ${lineName(command.axis, command.at)}`;
    case "settle":
      return settleSentence(board, command.target);
    case "assign":
      return assignSentence(board, command, nameOf);
  }
}

/** "A3", "A3 take 2" where there are several, "Stack 1" where it has no place; "a stack that is gone". */
export function stackName(board: Board, id: string): string {
  const stack = board.stacks.find((each) => each.id === id);
  if (!stack) return "a stack that is gone";
  if (stack.row === null || stack.column === null) {
    const unplaced = board.stacks.filter(({ row, column }) => row === null || column === null);
    return `Stack ${unplaced.indexOf(stack) + 1}`;
  }
  const name = tileName(stack.row, stack.column);
  return hasOtherTake(board, stack) ? `${name} take ${stack.take}` : name;
}

export function frameName(board: Board, id: string): string {
  return board.frames.find((frame) => frame.id === id)?.name ?? "a frame that is gone";
}

function moveSentence(board: Board, frameIds: readonly string[], target: string): string {
  const wanted = new Set(frameIds);
  const from = new Set(board.frames.filter(({ id }) => wanted.has(id)).map(({ stackId }) => stackId));
  const [only] = from;
  const source = from.size !== 1 || only === null || only === undefined ? "" : ` from ${stackName(board, only)}`;
  if (target === "loose") return `Took ${framesText(board, frameIds)} out${source.replace("from", "of")}`;
  return `Moved ${framesText(board, frameIds)}${source} to ${target}`;
}

type MoveTarget = Extract<PlannedCommand, { type: "move-frames" }>["to"];

function targetName(board: Board, to: MoveTarget): string {
  if (to.kind === "loose") return "loose";
  if (to.kind === "stack") return stackName(board, to.stackId);
  return to.place === null ? "a new stack" : `${tileName(to.place.row, to.place.column)}, a new stack`;
}

function placeSentence(board: Board, command: Extract<PlannedCommand, { type: "place-stack" }>): string {
  const name = stackName(board, command.stackId);
  if (command.place === null) return `Took ${name} out of the grid`;
  const target = tileName(command.place.row, command.place.column);
  switch (command.occupied) {
    case "swap":
      return `Swapped ${name} with ${target}`;
    case "push":
      return `Placed ${name} at ${target}, the row pushed along`;
    case "take":
      return `Placed ${name} at ${target} as another take`;
    case "refuse":
      return `Placed ${name} at ${target}`;
  }
}

function settleSentence(board: Board, target: Extract<PlannedCommand, { type: "settle" }>["target"]): string {
  if (target.kind === "stack") {
    const name = stackName(board, target.stackId);
    return target.isSettled ? `Settled ${name}` : `Opened ${name} again`;
  }
  const question = board.questions.find(({ id }) => id === target.questionId);
  if (!question) return "Settled a question";
  const answer = target.answer === null ? "keep as it is" : (question.answers[target.answer]?.label ?? "an answer");
  return `Settled “${question.message}”: ${answer}`;
}

function assignSentence(
  board: Board,
  { stackIds, userId }: Extract<PlannedCommand, { type: "assign" }>,
  nameOf: (userId: string) => string | null,
): string {
  const stacks = namesOf(stackIds.map((id) => stackName(board, id)));
  return userId === null ? `Gave ${stacks} to nobody` : `Gave ${stacks} to ${nameOf(userId) ?? "a member"}`;
}

function lineName(axis: "row" | "column", at: number): string {
  return axis === "row" ? `row ${tileName(at, 1).slice(0, -1)}` : `column ${at}`;
}

function atPlace(place: { readonly row: number; readonly column: number } | null): string {
  return place === null ? "" : `, the rest to ${tileName(place.row, place.column)}`;
}

function framesText(board: Board, ids: readonly string[]): string {
  return ids.length > NAMES_MOST ? countOf(ids.length, "frame") : namesOf(ids.map((id) => frameName(board, id)));
}

/** "A1", "A1 and A2", "A1, A2 and A3", "7 stacks". */
function namesOf(names: readonly string[]): string {
  if (names.length > NAMES_MOST) return countOf(names.length, "stack");
  return names.length < 2 ? names.join("") : `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`;
}

function hasOtherTake(board: Board, stack: BoardStack): boolean {
  return board.stacks.some(({ id, row, column }) => id !== stack.id && row === stack.row && column === stack.column);
}
