import type { Board, BoardQuestion } from "@/lib/board/model";
import { stackName } from "@/lib/board/sentence";
import { countOf } from "@/lib/board/words";
import { isGathered } from "@/lib/sorting/gathered-key";

/**
 * What an answer did, for the line beside the next question: "B5 left empty", "HARB0019 moved to A4".
 * @param board - before the answer, with present names
 * @param answer - index into the question's answers; null: all is kept as it is
 */
export function answerDone(board: Board, question: BoardQuestion, answer: number | null): string {
  const action = answer === null ? undefined : question.answers[answer]?.action;
  switch (action?.type) {
    case "move-frames": {
      const frames = framesText(board, action.frameIds);
      return action.toStackId === null
        ? `${frames} taken out`
        : `${frames} moved to ${stackName(board, action.toStackId)}`;
    }
    case "set-aside":
      return `${framesText(board, action.frameIds)} set aside`;
    case "bring-back":
      return `${framesText(board, action.frameIds)} brought back`;
    case "new-stack":
      return `${framesText(board, action.frameIds)} made a stack`;
    case "choose-take":
      return `${stackName(board, action.stackId, true)} is merged`;
    case "merge-stacks":
      return `${countOf(action.stackIds.length, "stack")} merged`;
    case "split-stack":
      return `${stackName(board, action.stackId)} split`;
    case "take-out":
      return `${countOf(action.stackIds.length, "stack")} taken out of the grid`;
    default:
      return acceptedText(question);
  }
}

/** What it came to that all was kept as it was. */
export function acceptedText({ kind, key, tile, frameIds, stackIds }: AcceptedQuestion): string {
  const isOne = !isGathered(key);
  switch (kind) {
    case "hole":
      return isOne && tile !== null ? `${tile} left empty` : "Places left empty";
    case "thin-seam":
      return isOne ? "Small overlap accepted" : "Small overlaps accepted";
    case "few-frames":
      return isOne && tile !== null
        ? `Few frames of ${tile} accepted`
        : `Few frames of ${countOf(stackIds.length, "stack")} accepted`;
    case "stray":
      return frameIds.length === 1 ? "Left loose" : "Left as they are";
    default:
      return "Kept as it is";
  }
}

type AcceptedQuestion = Pick<BoardQuestion, "kind" | "key" | "tile" | "frameIds" | "stackIds">;

function framesText(board: Board, ids: readonly string[]): string {
  if (ids.length !== 1) return countOf(ids.length, "frame");
  return board.frames.find(({ id }) => id === ids[0])?.name ?? "A frame";
}
