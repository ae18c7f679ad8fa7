import { expect, test } from "vitest";
import { type LaterStep, standingAfter } from "@/lib/board/standing";

const step = (id: string, what: Partial<LaterStep> = {}): LaterStep => ({
  id,
  type: "move-frames",
  isUndone: false,
  undoes: null,
  undoesAfter: null,
  ...what,
});
const idsAfter = (revision: number, later: readonly LaterStep[]) => standingAfter(revision, later).map(({ id }) => id);

// Expected by hand: what of the board differs between the two moments.
test("a step and its undo cancel out, a redo counts as the step alone", () => {
  const undone = [step("move", { isUndone: true }), step("undo", { type: "undo", undoes: "move" })];
  expect(idsAfter(1, undone)).toEqual([]);
  const redone = [
    step("move"),
    step("undo", { type: "undo", undoes: "move", isUndone: true }),
    step("redo", { type: "undo", undoes: "undo" }),
  ];
  expect(idsAfter(1, redone)).toEqual(["move"]);
});

test("an undo of what was done before counts, and so does going back further; asking for a sorting does not", () => {
  expect(idsAfter(5, [step("undo", { type: "undo", undoes: "earlier" })])).toEqual(["undo"]);
  expect(idsAfter(5, [step("back", { type: "undo-back-to", undoesAfter: 2 })])).toEqual(["back"]);
  expect(idsAfter(5, [step("back", { type: "undo-back-to", undoesAfter: 5 })])).toEqual([]);
  expect(idsAfter(5, [step("asked", { type: "sort-anew" })])).toEqual([]);
});
