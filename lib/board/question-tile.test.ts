import { expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import { applyChanges } from "@/lib/board/changes";
import { questionTile } from "@/lib/board/question-tile";
import { buildManifest } from "@/lib/handover/manifest";
import { makeEventfulBoard } from "@/tests/support/make-board";

test("a question is found at the tile where its stack lies now, a hole's where it was asked about", () => {
  const board = applyChanges(makeEventfulBoard(), [{ on: "line", axis: "row", at: 1, by: 1 }]);
  const index = indexBoard(board);
  // Asked about C1, which a new first row made D1.
  expect(index.tiles.get("D1")?.questions.map(({ id }) => id)).toEqual(["question-2"]);
  expect(index.tiles.get("C1")?.questions).toEqual([]);
  const manifest = buildManifest(board, { createdAt: "2026-05-09T10:00:00.000Z", hasProjectId: true });
  expect(manifest.toSettle.map(({ tile }) => tile)).toEqual(["B3", "D1", "B5"]);
});

test("where the first stack is gone the next one counts; without a place there is no tile", () => {
  const stacks = new Map([
    ["b", { row: 2, column: 3 }],
    ["c", { row: null, column: null }],
  ]);
  expect(questionTile({ stackIds: ["a", "b"], tile: "A1" }, stacks)).toBe("B3");
  expect(questionTile({ stackIds: ["c"], tile: "A1" }, stacks)).toBeNull();
  expect(questionTile({ stackIds: ["a"], tile: "A1" }, stacks)).toBe("A1");
});
