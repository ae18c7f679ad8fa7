import type { Board } from "@/lib/board/model";
import { namer } from "@/lib/board/name-tokens";
import { questionTile } from "@/lib/board/question-tile";

/**
 * The board with all that was said of it in the names that its tiles have now: questions, answers, reasons. To be shown,
 * printed or recorded; changes are planned on the board itself. What names nothing is the same object in both.
 */
export function withPresentNames(board: Board): Board {
  const stacks = new Map(board.stacks.map((stack) => [stack.id, stack]));
  const say = namer(stacks, board.frames);
  const withReason = <Entity extends { readonly reason: string }>(entity: Entity): Entity => {
    const reason = say(entity.reason);
    return reason === entity.reason ? entity : { ...entity, reason };
  };
  return {
    ...board,
    stacks: board.stacks.map(withReason),
    frames: board.frames.map(withReason),
    questions: board.questions.map((question) => ({
      ...question,
      message: say(question.message),
      evidence: say(question.evidence),
      tile: questionTile(question, stacks),
      answers: question.answers.map((answer) => ({ ...answer, label: say(answer.label) })),
    })),
  };
}
