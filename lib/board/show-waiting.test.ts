import { expect, test } from "vitest";
import { applyChanges } from "@/lib/board/changes";
import { boardCommandSchema, type BoardCommand, type CommandDraft } from "@/lib/board/command-schema";
import { withExpectations } from "@/lib/board/expectations";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { showWaiting, type WaitingCommand } from "@/lib/board/show-waiting";
import { makeEventfulBoard } from "@/tests/support/make-board";

const START = makeEventfulBoard();
let ids = 0;

function command(draft: CommandDraft, board: Board = START): BoardCommand {
  ids += 1;
  const id = `${String(ids).padStart(8, "0")}-1111-4111-8111-111111111111`;
  return boardCommandSchema.parse({ ...withExpectations(board, draft), id, revision: board.revision });
}

const wait = (given: BoardCommand): WaitingCommand => ({ command: given, revision: null, changes: null });
const stackOf = (board: Board, id: string) => board.frames.find((frame) => frame.id === id)?.stackId;
const moveTo = (stackId: string): CommandDraft => ({
  type: "move-frames",
  frameIds: ["frame-17"],
  to: { kind: "stack", stackId },
});

test("what was asked for is shown on top of the confirmed board, one command on the other", () => {
  const first = command(moveTo("stack-1-4"));
  const shown = showWaiting(START, [wait(first)]);
  expect(stackOf(shown, "frame-17")).toBe("stack-1-4");
  expect(stackOf(START, "frame-17")).toBe("stack-1-3");
  const second = command({ type: "choose-reference", stackId: "stack-1-4", frameId: "frame-17" }, shown);
  const both = showWaiting(START, [wait(first), wait(second)]);
  expect(both.stacks.find(({ id }) => id === "stack-1-4")?.referenceId).toBe("frame-17");
});

test("an answered command counts until the confirmed board has reached its revision, and not twice", () => {
  const add = command({ type: "add-line", axis: "row", at: 1 });
  const answered: WaitingCommand = { command: add, revision: 2, changes: [{ on: "line", axis: "row", at: 1, by: 1 }] };
  expect(showWaiting(START, [answered]).grid.rows).toBe(START.grid.rows + 1);
  const confirmed = { ...applyChanges(START, answered.changes ?? []), revision: 2 };
  expect(showWaiting(confirmed, [answered])).toBe(confirmed);
});

test("a refused command, gone from the waiting, leaves the board as it was; what rested on it shows nothing", () => {
  const first = command(moveTo("stack-1-4"));
  const rested = command(
    { type: "choose-reference", stackId: "stack-1-4", frameId: "frame-17" },
    showWaiting(START, [wait(first)]),
  );
  expect(showWaiting(START, [wait(rested)])).toEqual(START);
});

test("where somebody else moved the frame meanwhile, the command shows nothing: its expectation fails", () => {
  const mine = command(moveTo("stack-1-4"));
  const theirs = command(moveTo("stack-2-2"));
  if (theirs.type === "undo" || theirs.type === "undo-back-to") throw new Error("a plain command");
  const confirmed = { ...applyChanges(START, planCommand(START, theirs)), revision: 2 };
  expect(stackOf(showWaiting(confirmed, [wait(mine)]), "frame-17")).toBe("stack-2-2");
});

test("undo and redo of what still waits are shown at once", () => {
  const move = command(moveTo("stack-1-4"));
  const undo = command({ type: "undo", commandId: move.id });
  const redo = command({ type: "undo", commandId: undo.id });
  expect(stackOf(showWaiting(START, [move, undo].map(wait)), "frame-17")).toBe("stack-1-3");
  expect(stackOf(showWaiting(START, [move, undo, redo].map(wait)), "frame-17")).toBe("stack-1-4");
});

test("expectations name what the person saw", () => {
  expect(withExpectations(START, moveTo("stack-1-4"))).toMatchObject({ expect: { "frame-17": "stack-1-3" } });
  expect(withExpectations(START, { type: "place-stack", stackId: "stack-1-1", place: null })).toMatchObject({
    expect: { row: 1, column: 1, take: 1 },
  });
  expect(withExpectations(START, { type: "bring-back", frameIds: ["frame-8", "frame-9"] })).toMatchObject({
    expect: { "frame-8": "soft", "frame-9": null },
  });
  const referenceId = START.stacks.find(({ id }) => id === "stack-1-3")?.referenceId;
  expect(
    withExpectations(START, { type: "choose-reference", stackId: "stack-1-3", frameId: "frame-17" }),
  ).toMatchObject({ expect: { referenceId } });
  // From the frame it is split at; those before it stay, wherever they are.
  expect(
    withExpectations(START, {
      type: "split-stack",
      stackId: "stack-1-3",
      atFrameId: "frame-16",
      newStackId: "new",
      place: null,
    }),
  ).toMatchObject({ expect: { "frame-16": "stack-1-3", "frame-17": "stack-1-3" } });
});
