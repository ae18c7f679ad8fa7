import { expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import type { BoardQuestion } from "@/lib/board/model";
import { questionPictures } from "@/lib/board/question-pictures";
import { makeEventfulBoard } from "@/tests/support/make-board";

test("a stray is shown with the reference of the tile that an answer offers", () => {
  const board = makeEventfulBoard();
  const loose = board.frames.find(({ stackId }) => stackId === null);
  if (!loose) throw new Error("the eventful board has loose frames");
  const question: BoardQuestion = {
    id: "stray",
    key: "stray",
    kind: "stray",
    message: `Does ${loose.name} belong to the picture?`,
    evidence: "",
    frameIds: [loose.id],
    stackIds: [],
    tile: null,
    answers: [
      { label: "Leave it loose", action: { type: "keep" } },
      { label: "Move to A4", action: { type: "move-frames", frameIds: [loose.id], toStackId: "stack-1-4" } },
    ],
    severity: 1,
  };
  expect(questionPictures(indexBoard(board), question).map(({ label }) => label)).toEqual([loose.name, "A4"]);
});
