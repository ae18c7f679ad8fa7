import { expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import { docketAnswers, questionMove, settleDraft } from "@/lib/board/docket-answers";
import type { BoardQuestion } from "@/lib/board/model";
import { makeEventfulBoard } from "@/tests/support/make-board";

const board = makeEventfulBoard();
const [between, few] = board.questions;
if (!between || !few) throw new Error("the board has its questions");
const ask = (answers: BoardQuestion["answers"]): BoardQuestion => ({ ...between, answers });

test("the answers are those of the computation, its first recommended", () => {
  expect(docketAnswers(board, between)).toEqual([
    { label: "Move to A4", answer: 0, isRecommended: true },
    { label: "Keep in A3", answer: 1, isRecommended: false },
  ]);
});

test("there is always a way to leave everything as it is", () => {
  const keep = { label: "Keep it as it is", answer: null, isRecommended: false };
  expect(docketAnswers(board, ask([]))).toEqual([keep]);
  const move = {
    label: "Move to A4",
    action: { type: "move-frames", frameIds: ["frame-17"], toStackId: "stack-1-4" },
  } as const;
  expect(docketAnswers(board, ask([move])).at(-1)).toEqual(keep);
  // Merging the take that is chosen keeps all as it is.
  const take = (label: string, stackId: string) => ({ label, action: { type: "choose-take", stackId } }) as const;
  const both = ask([take("Merge take 1", "stack-3-6"), take("Merge take 2", "stack-3-6-take-2")]);
  expect(docketAnswers(board, both).map(({ label }) => label)).toEqual(["Merge take 1", "Merge take 2"]);
});

test("only an answer that splits a stack names a new one", () => {
  const split = {
    label: "Split",
    action: { type: "split-stack", stackId: "stack-1-3", atFrameId: "frame-15" },
  } as const;
  const target = { kind: "question", questionId: "question-1" };
  expect(settleDraft(ask([split]), 0, () => "new-1")).toEqual({
    type: "settle",
    target: { ...target, answer: 0, newStackId: "new-1" },
  });
  expect(settleDraft(between, 1, () => "new-1")).toEqual({ type: "settle", target: { ...target, answer: 1 } });
  expect(settleDraft(ask([split]), null, () => "new-1")).toEqual({
    type: "settle",
    target: { ...target, answer: null },
  });
});

test("a question shows which frame it would bring to which tile", () => {
  const index = indexBoard(board);
  expect(questionMove(index, between)).toEqual({ frameId: "frame-17", tile: "A4" });
  expect(questionMove(index, few)).toBeNull();
});
