import type { BoardIndex } from "@/lib/board/board-index";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board, BoardQuestion } from "@/lib/board/model";
import type { AnswerAction } from "@/lib/sorting/types";

export interface DocketAnswer {
  readonly label: string;
  /** Index into the question's answers; null: keep all as it is. */
  readonly answer: number | null;
  /** What the measurements speak for, where it leaves nothing out of the merge: never a keeping, nor a setting aside. */
  readonly isRecommended: boolean;
}

/** What can be answered: what the computation offers, and always a way to leave everything as it is. */
export function docketAnswers(board: Board, question: BoardQuestion): DocketAnswer[] {
  const offered = question.answers.map(({ label }, at) => ({
    label,
    answer: at,
    isRecommended: isRecommended(question, at),
  }));
  if (question.answers.some(({ action }) => keepsAll(board, action))) return offered;
  return [...offered, { label: "Keep it as it is", answer: null, isRecommended: false }];
}

/** Actions that lose nothing: no frame is left out, no small overlap, hole or lack of frames is taken as it is. */
const LOSSLESS: ReadonlySet<AnswerAction["type"]> = new Set([
  "move-frames",
  "choose-take",
  "merge-stacks",
  "split-stack",
  "new-stack",
]);

/** The computation gives what it holds for right first. */
function isRecommended({ answers }: BoardQuestion, at: number): boolean {
  const action = at === 0 ? answers[0]?.action : undefined;
  if (!action || !LOSSLESS.has(action.type)) return false;
  return action.type !== "move-frames" || action.toStackId !== null;
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
  const action = question.answers[0]?.action;
  if (action?.type !== "move-frames" || action.toStackId === null) return null;
  const tile = index.tileOfStack.get(action.toStackId)?.name;
  const frameId = action.frameIds[0];
  return tile === undefined || frameId === undefined ? null : { frameId, tile };
}
