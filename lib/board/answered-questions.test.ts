import { describe, expect, test } from "vitest";
import { applyChanges } from "@/lib/board/changes";
import { boardCommandSchema, type CommandDraft, type PlannedCommand } from "@/lib/board/command-schema";
import type { Board, BoardQuestion } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import type { AnswerAction, QuestionKind } from "@/lib/sorting/types";
import { makeEventfulBoard } from "@/tests/support/make-board";

// A board of 3 by 6 tiles, six frames each (frame-0 to frame-5 in A1 and so on), B5 a hole, C6 with a second take.
const BOARD = makeEventfulBoard();

function ask(kind: QuestionKind, about: Partial<BoardQuestion>, ...actions: AnswerAction[]): Board {
  const question: BoardQuestion = {
    id: "asked",
    key: "asked",
    kind,
    message: "?",
    evidence: "",
    frameIds: [],
    stackIds: [],
    tile: null,
    answers: actions.map((action) => ({ label: action.type, action })),
    severity: 1,
    ...about,
  };
  return { ...BOARD, questions: [question] };
}

function after(board: Board, draft: CommandDraft): Board {
  const command = boardCommandSchema.parse({ ...draft, id: "5f0c3f8e-58c9-4dd1-9a0e-0d8b3c3a2f11", revision: 1 });
  return applyChanges(board, planCommand(board, command as PlannedCommand));
}

const isOpen = (board: Board, draft: CommandDraft) => after(board, draft).questions.length > 0;

const move = (frameIds: string[], stackId: string | null): CommandDraft => ({
  type: "move-frames",
  frameIds,
  to: stackId === null ? { kind: "loose" } : { kind: "stack", stackId },
});

describe("a question is closed", () => {
  const belongs = ask(
    "between-stacks",
    { frameIds: ["frame-17"], stackIds: ["stack-1-3", "stack-1-4"] },
    { type: "move-frames", frameIds: ["frame-17"], toStackId: "stack-1-4" },
    { type: "keep" },
  );

  test("by moving its frame to the tile that was proposed, or anywhere else", () => {
    expect(isOpen(belongs, move(["frame-17"], "stack-1-4"))).toBe(false);
    expect(isOpen(belongs, move(["frame-17"], "stack-3-1"))).toBe(false);
    expect(isOpen(belongs, move(["frame-17"], null))).toBe(false);
    expect(isOpen(belongs, move(["frame-16"], "stack-1-4"))).toBe(true);
  });

  test("where one of its stacks is gone", () => {
    expect(isOpen(belongs, { type: "merge-stacks", intoStackId: "stack-1-5", stackIds: ["stack-1-4"] })).toBe(false);
    expect(isOpen(belongs, { type: "merge-stacks", intoStackId: "stack-1-6", stackIds: ["stack-1-5"] })).toBe(true);
  });

  test("about a soft frame by setting it aside for any reason, or bringing it back", () => {
    const soft = ask("soft", { frameIds: ["frame-1"] }, { type: "set-aside", frameIds: ["frame-1"], reason: "soft" });
    expect(isOpen(soft, { type: "set-aside", frameIds: ["frame-1"], reason: "by hand" })).toBe(false);
    expect(isOpen(soft, { type: "set-aside", frameIds: ["frame-2"], reason: "soft" })).toBe(true);
    const away = ask("soft", { frameIds: ["frame-8"] }, { type: "bring-back", frameIds: ["frame-8"] });
    expect(isOpen(away, { type: "bring-back", frameIds: ["frame-8"] })).toBe(false);
  });

  test("about several frames once the last of them is where an answer would put it", () => {
    const frameIds = ["frame-0", "frame-1"];
    const stray = ask("stray", { frameIds }, { type: "move-frames", frameIds, toStackId: null });
    const half = after(stray, move(["frame-0"], null));
    expect(half.questions).toHaveLength(1);
    expect(isOpen(half, move(["frame-1"], null))).toBe(false);
  });

  test("about two takes by choosing the other, or by moving one of them elsewhere", () => {
    const takes = ["stack-3-6", "stack-3-6-take-2"];
    const choose = (stackId: string) => ({ type: "choose-take", stackId }) as const;
    const retake = ask("retake", { stackIds: takes }, choose("stack-3-6"), choose("stack-3-6-take-2"));
    expect(isOpen(retake, choose("stack-3-6-take-2"))).toBe(false);
    expect(isOpen(retake, { type: "place-stack", stackId: "stack-3-6", place: { row: 2, column: 5 } })).toBe(false);
    // The one that is chosen already: nothing is done by that, so nothing is decided.
    expect(isOpen(retake, choose("stack-3-6"))).toBe(true);
  });

  test("about a hole by putting a stack there, not by a line that shifts one past it", () => {
    const hole = ask("hole", { tile: "B5" }, { type: "keep" });
    expect(isOpen(hole, { type: "place-stack", stackId: "stack-3-6", place: { row: 2, column: 5 } })).toBe(false);
    const place = { row: 2, column: 5 };
    const to = { kind: "new-stack", stackId: "new", place } as const;
    expect(isOpen(hole, { type: "move-frames", frameIds: ["frame-1"], to })).toBe(false);
    expect(isOpen(hole, { type: "add-line", axis: "column", at: 1 })).toBe(true);
  });

  test("about too few frames once there are enough", () => {
    const few = ask("few-frames", { stackIds: ["stack-2-1"] }, { type: "keep" });
    const inUse = few.frames.filter(({ stackId }) => stackId === "stack-2-1").map(({ id }) => id);
    const away = after({ ...few, questions: [] }, { type: "set-aside", frameIds: inUse.slice(0, 3), reason: "soft" });
    const board = { ...away, questions: few.questions };
    expect(isOpen(board, { type: "bring-back", frameIds: inUse.slice(0, 1) })).toBe(false);
    expect(isOpen(board, { type: "set-aside", frameIds: inUse.slice(4, 5), reason: "soft" })).toBe(true);
  });

  test("about one stack or two by splitting it there", () => {
    const two = ask(
      "two-stacks",
      { frameIds: ["frame-3"], stackIds: ["stack-1-1"] },
      { type: "keep" },
      { type: "split-stack", stackId: "stack-1-1", atFrameId: "frame-3" },
    );
    const split = { type: "split-stack", stackId: "stack-1-1", newStackId: "new", place: null } as const;
    expect(isOpen(two, { ...split, atFrameId: "frame-3" })).toBe(false);
    expect(isOpen(two, { ...split, atFrameId: "frame-4" })).toBe(true);
  });
});

describe("a settled stack", () => {
  const settled = after(
    { ...BOARD, questions: [] },
    { type: "settle", target: { kind: "stack", stackId: "stack-1-1", isSettled: true } },
  );
  const isSettled = (board: Board) => board.stacks.find(({ id }) => id === "stack-1-1")?.isSettled;

  test("is no longer settled once frames come in or go out", () => {
    expect(isSettled(settled)).toBe(true);
    expect(isSettled(after(settled, move(["frame-1"], "stack-1-2")))).toBe(false);
    expect(isSettled(after(settled, move(["frame-7"], "stack-1-1")))).toBe(false);
  });

  test("stays settled where its place changes, or a frame is set aside", () => {
    expect(isSettled(after(settled, { type: "set-aside", frameIds: ["frame-1"] }))).toBe(true);
    const place = { row: 2, column: 5 };
    expect(isSettled(after(settled, { type: "place-stack", stackId: "stack-1-1", place }))).toBe(true);
  });
});
