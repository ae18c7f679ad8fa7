import type { BoardCommand } from "@/lib/board/command-schema";
import { framesOf } from "@/lib/board/look-up";
import type { Board } from "@/lib/board/model";
import { withPresentNames } from "@/lib/board/present-names";
import { stackName } from "@/lib/board/sentence";
import { countOf } from "@/lib/board/words";

/** Of a command that names hundreds of frames, as many as are worth keeping words for. */
const SUBJECTS_MOST = 200;

/** How a frame, stack or question stands on this board, in one clause; null: it is not there. */
export function describeSubject(board: Board, id: string): string | null {
  const frame = board.frames.find((each) => each.id === id);
  if (frame) {
    const place = frame.stackId === null ? "is loose" : `is in ${stackName(board, frame.stackId)}`;
    return `${frame.name} ${place}${frame.setAside === null ? "" : `, set aside as ${frame.setAside}`}`;
  }
  const stack = board.stacks.find((each) => each.id === id);
  if (stack) {
    const frames = framesOf(board, id);
    const reference = frames.find((each) => each.id === stack.referenceId);
    const name = stackName(board, id);
    const facts = [
      countOf(frames.length, "frame"),
      ...(reference ? [`reference ${reference.name}`] : []),
      ...(stack.isSettled ? ["settled"] : []),
    ];
    return `${name.charAt(0).toUpperCase()}${name.slice(1)}: ${facts.join(", ")}`;
  }
  const question = withPresentNames(board).questions.find((each) => each.id === id);
  if (question) return `“${question.message}” is open`;
  return id === "grid"
    ? `The grid has ${countOf(board.grid.rows, "row")} and ${countOf(board.grid.columns, "column")}`
    : null;
}

/** What the person saw of everything that their command names, by id. */
export function describeSubjects(board: Board, command: BoardCommand): Record<string, string> {
  const named = subjectsOf(command).slice(0, SUBJECTS_MOST);
  const frames = new Map(board.frames.map((frame) => [frame.id, frame]));
  const stackIds = named.flatMap((id) => frames.get(id)?.stackId ?? []);
  return Object.fromEntries(
    [...new Set([...named, ...stackIds, "grid"])].flatMap((id) => {
      const text = describeSubject(board, id);
      return text === null ? [] : [[id, text]];
    }),
  );
}

/** Ids of the frames, stacks and questions that a command names, those it makes included. */
export function subjectsOf(command: BoardCommand): string[] {
  switch (command.type) {
    case "move-frames":
      return [...command.frameIds, ...(command.to.kind === "loose" ? [] : [command.to.stackId])];
    case "split-stack":
      return [command.stackId, command.atFrameId, command.newStackId];
    case "merge-stacks":
      return [command.intoStackId, ...command.stackIds];
    case "place-stack":
    case "choose-take":
      return [command.stackId];
    case "set-aside":
    case "bring-back":
      return [...command.frameIds];
    case "choose-reference":
      return [command.stackId, command.frameId];
    case "settle":
      return [command.target.kind === "question" ? command.target.questionId : command.target.stackId];
    case "assign":
      return [...command.stackIds];
    case "undo":
      return [command.commandId];
    case "add-line":
    case "remove-line":
    case "undo-back-to":
      return [];
  }
}
