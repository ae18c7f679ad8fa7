import type { BoardIndex } from "@/lib/board/board-index";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board, BoardQuestion } from "@/lib/board/model";

export interface DocketAnswer {
  readonly label: string;
  /** Index into the question's answers; null: keep all as it is. */
  readonly answer: number | null;
  /** The first that the computation gave. */
  readonly isRecommended: boolean;
}

/** What can be answered: what the computation offers, and always a way to leave everything as it is. */
export function docketAnswers(board: Board, question: BoardQuestion): DocketAnswer[] {
  const offered = question.answers.map(({ label }, at) => ({ label, answer: at, isRecommended: at === 0 }));
  if (question.answers.some(({ action }) => keepsAll(board, action))) return offered;
  return [...offered, { label: "Keep it as it is", answer: null, isRecommended: false }];
}

function keepsAll(board: Board, action: BoardQuestion["answers"][number]["action"]): boolean {
  if (action.type === "keep") return true;
  return (
    action.type === "choose-take" && board.stacks.some(({ id, isChosenTake }) => id === action.stackId && isChosenTake)
  );
}

/** @param makeId - for the stack that an answer makes */
export function settleDraft(question: BoardQuestion, answer: number | null, makeId: () => string): CommandDraft {
  const type = answer === null ? null : question.answers[answer]?.action.type;
  const makesStack = type === "split-stack" || type === "new-stack";
  return {
    type: "settle",
    target: { kind: "question", questionId: question.id, answer, ...(makesStack ? { newStackId: makeId() } : {}) },
  };
}

/** Frame and tile that the recommended answer would bring together; null where it moves nothing to a tile. */
export function questionMove(index: BoardIndex, question: BoardQuestion): { frameId: string; tile: string } | null {
  for (const { action } of question.answers) {
    if (action.type !== "move-frames" || action.toStackId === null) continue;
    const tile = index.tileOfStack.get(action.toStackId)?.name;
    const frameId = action.frameIds[0];
    if (tile !== undefined && frameId !== undefined) return { frameId, tile };
  }
  return null;
}
