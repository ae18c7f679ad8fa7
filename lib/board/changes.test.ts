import { expect, test } from "vitest";
import { applyChanges, ChangeConflict, type StackPatch } from "@/lib/board/changes";
import { makeEventfulBoard } from "@/tests/support/make-board";

const board = makeEventfulBoard();

function refusalOf(before: StackPatch): ChangeConflict {
  const id = board.stacks[0]?.id ?? "";
  try {
    applyChanges(board, [{ on: "stack", id, before, after: {} }]);
  } catch (error) {
    if (error instanceof ChangeConflict) return error;
    throw error;
  }
  throw new Error("applied");
}

test("whatever people decide of a stack and is otherwise now is refused, in words that name no field", () => {
  const decided: StackPatch = {
    row: 90,
    column: 90,
    take: 90,
    isChosenTake: !board.stacks[0]?.isChosenTake,
    referenceId: "none",
    isSettled: !board.stacks[0]?.isSettled,
    shareUserId: "somebody",
  };
  for (const [field, value] of Object.entries(decided)) {
    const { message, subjectId } = refusalOf({ [field]: value });
    expect(subjectId).toBe(board.stacks[0]?.id);
    expect(message).toMatch(/^[A-Z][a-z ]+\.$/);
    if (/[A-Z]/.test(field)) expect(message).not.toContain(field);
  }
});

test("what is only measured may be otherwise: it is written over", () => {
  const [stack] = board.stacks;
  if (!stack) throw new Error("no stack");
  const change = { on: "stack", id: stack.id, before: { confidence: -1 }, after: { confidence: 0.5 } } as const;
  const after = applyChanges(board, [change]);
  expect(after.stacks.find(({ id }) => id === stack.id)?.confidence).toBe(0.5);
  expect(stack.confidence).not.toBe(0.5);
});
