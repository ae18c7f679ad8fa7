import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import { applyChanges, ChangeConflict, invertChanges, type Change } from "@/lib/board/changes";
import { boardCommandSchema, type PlannedCommand } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { planInverted } from "@/lib/board/plan-inverted";
import { requireWholeBoard } from "@/lib/board/whole-board";
import type { AnswerAction } from "@/lib/sorting/types";
import { makeEventfulBoard } from "@/tests/support/make-board";

const START: Board = canonical(withEveryAnswer(withSecondTake(makeEventfulBoard())));
const FRAME_IDS = START.frames.map(({ id }) => id);
const STACK_IDS = START.stacks.map(({ id }) => id);

/** Any command on the board's own frames and stacks, most of them possible, some not. */
function anyCommand(): fc.Arbitrary<PlannedCommand> {
  const frameIds = fc.uniqueArray(fc.constantFrom(...FRAME_IDS), { minLength: 1, maxLength: 4 });
  const stackId = fc.constantFrom(...STACK_IDS, "new-1", "new-2");
  const place = fc.record({ row: fc.integer({ min: 1, max: 5 }), column: fc.integer({ min: 1, max: 8 }) });
  const axis = fc.constantFrom("row", "column");
  const at = fc.integer({ min: 1, max: 7 });
  const newId = fc.constantFrom("new-1", "new-2", "new-3");
  const body: fc.Arbitrary<Record<string, unknown>> = fc.oneof(
    fc.record({ type: fc.constant("move-frames"), frameIds, to: fc.record({ kind: fc.constant("stack"), stackId }) }),
    fc.record({ type: fc.constant("move-frames"), frameIds, to: fc.constant({ kind: "loose" }) }),
    fc.record({
      type: fc.constant("move-frames"),
      frameIds,
      to: fc.record({ kind: fc.constant("new-stack"), stackId: newId, place: fc.option(place) }),
    }),
    fc.record({
      type: fc.constant("split-stack"),
      stackId,
      atFrameId: fc.constantFrom(...FRAME_IDS),
      newStackId: newId,
      place: fc.option(place),
    }),
    fc.record({
      type: fc.constant("merge-stacks"),
      intoStackId: stackId,
      stackIds: fc.uniqueArray(stackId, { minLength: 1, maxLength: 2 }),
    }),
    fc.record({
      type: fc.constant("place-stack"),
      stackId,
      place: fc.option(place),
      occupied: fc.constantFrom("refuse", "swap", "push", "take"),
    }),
    fc.record({ type: fc.constant("set-aside"), frameIds, reason: fc.constantFrom("soft", "by hand") }),
    fc.record({ type: fc.constant("bring-back"), frameIds }),
    fc.record({ type: fc.constant("choose-reference"), stackId, frameId: fc.constantFrom(...FRAME_IDS) }),
    fc.record({ type: fc.constant("choose-take"), stackId }),
    fc.record({ type: fc.constant("add-line"), axis, at }),
    fc.record({ type: fc.constant("remove-line"), axis, at }),
    fc.record({
      type: fc.constant("settle"),
      target: fc.record({
        kind: fc.constant("question"),
        questionId: fc.constantFrom(...START.questions.map(({ id }) => id)),
        answer: fc.constantFrom(null, ...Array.from({ length: 10 }, (_, at) => at)),
        newStackId: newId,
      }),
    }),
    fc.record({
      type: fc.constant("assign"),
      stackIds: fc.constant([STACK_IDS[0]]),
      userId: fc.constantFrom(null, "u1"),
    }),
  );
  return body.map((fields) => {
    const command = boardCommandSchema.parse({ id: crypto.randomUUID(), revision: 0, ...fields });
    if (command.type === "undo" || command.type === "undo-back-to") throw new Error("not made here");
    return command;
  });
}

interface Step {
  readonly before: Board;
  readonly changes: readonly Change[];
  readonly after: Board;
}

/** Applies commands one after another as the server would: refused ones change nothing. */
function run(commands: readonly PlannedCommand[]): Step[] {
  const steps: Step[] = [];
  let board = START;
  for (const command of commands) {
    try {
      const changes = planCommand(board, command);
      const after = applyChanges(board, changes);
      steps.push({ before: board, changes, after });
      board = after;
    } catch (error) {
      if (!(error instanceof ChangeConflict)) throw error;
    }
  }
  return steps;
}

describe("any sequence of commands", () => {
  test("taken back in reverse gives the board that it started from", () => {
    fc.assert(
      fc.property(fc.array(anyCommand(), { maxLength: 12 }), (commands) => {
        for (const { before, changes, after } of run(commands)) {
          expect(applyChanges(after, invertChanges(changes))).toEqual(before);
        }
      }),
      { numRuns: 300 },
    );
  });

  test("so too where two takes of one tile go at once", () => {
    const merge = { type: "merge-stacks", intoStackId: "stack-1-1", stackIds: ["stack-3-6", "stack-3-6-take-2"] };
    const command = boardCommandSchema.parse({ id: crypto.randomUUID(), revision: 0, ...merge });
    const [step] = run([command as PlannedCommand]);
    expect(step && applyChanges(step.after, invertChanges(step.changes))).toEqual(START);
  });

  test("leaves every frame in exactly one place, every place with one stack a take and one chosen take", () => {
    fc.assert(
      fc.property(fc.array(anyCommand(), { maxLength: 12 }), (commands) => {
        for (const { after } of run(commands)) expectWhole(after);
      }),
      { numRuns: 300 },
    );
  });

  test("with undos of any of them in between leaves the board whole, and what was undone can be done again", () => {
    const anyTurn = fc.record({ command: anyCommand(), isUndo: fc.boolean(), which: fc.nat(30) });
    fc.assert(
      fc.property(fc.array(anyTurn, { minLength: 3, maxLength: 14 }), (turns) => {
        let board = START;
        const done: (readonly Change[])[] = [];
        for (const { command, isUndo, which } of turns) {
          const undone = done[which % Math.max(1, done.length)];
          try {
            const changes =
              isUndo && undone ? planInverted(board, invertChanges(undone), true) : planCommand(board, command);
            const after = applyChanges(board, changes);
            requireWholeBoard(board, after);
            expect(applyChanges(after, invertChanges(changes))).toEqual(board);
            board = after;
            done.push(changes);
          } catch (error) {
            if (!(error instanceof ChangeConflict)) throw error;
            // A command is refused for what it asks, never for what it would have made of the board.
            if (!isUndo || !undone) expect(error.message).not.toMatch(/ would /);
          }
          expectWhole(board);
        }
      }),
      { numRuns: 150 },
    );
  });

  test("changes neither the board that it is applied to nor the record", () => {
    fc.assert(
      fc.property(anyCommand(), (command) => {
        const frozen = JSON.stringify(START);
        run([command]);
        expect(JSON.stringify(START)).toBe(frozen);
      }),
    );
  });
});

function expectWhole(board: Board): void {
  expect(board.frames.map(({ id }) => id).sort()).toEqual([...FRAME_IDS].sort());
  const stackIds = new Set(board.stacks.map(({ id }) => id));
  const held = new Set(board.frames.map(({ stackId }) => stackId));
  for (const { stackId } of board.frames) if (stackId !== null) expect(stackIds).toContain(stackId);
  const places = new Map<string, number>();
  const takes = new Set<string>();
  for (const stack of board.stacks) {
    expect(held, `stack ${stack.id} has frames`).toContain(stack.id);
    expect(stack.row === null).toBe(stack.column === null);
    if (stack.row === null || stack.column === null) continue;
    expect(stack.row).toBeLessThanOrEqual(board.grid.rows);
    expect(stack.column).toBeLessThanOrEqual(board.grid.columns);
    const place = `${stack.row}/${stack.column}`;
    expect(takes).not.toContain(`${place}/${stack.take}`);
    takes.add(`${place}/${stack.take}`);
    places.set(place, (places.get(place) ?? 0) + Number(stack.isChosenTake));
  }
  for (const [place, chosen] of places) expect(chosen, `chosen takes at ${place}`).toBe(1);
  for (const stack of board.stacks) {
    if (stack.referenceId === null) continue;
    const reference = board.frames.find(({ id }) => id === stack.referenceId);
    expect(reference?.stackId).toBe(stack.id);
  }
}

/** The second take gets two frames of its own: a stack on the board holds at least one. */
function withSecondTake(board: Board): Board {
  const second = board.stacks.find(({ take }) => take === 2);
  const [reference, other] = board.frames.filter(({ stackId }) => stackId === null);
  if (!second || !reference || !other) throw new Error("the eventful board has a second take and loose frames");
  const stacks = board.stacks.map((stack) => (stack === second ? { ...stack, referenceId: reference.id } : stack));
  const frames = board.frames.map((frame) =>
    frame === reference || frame === other ? { ...frame, stackId: second.id } : frame,
  );
  return { ...board, stacks, frames };
}

/** One question more, that offers everything an answer may do, several at places that others touch too. */
function withEveryAnswer(board: Board): Board {
  const first = board.questions[0];
  if (!first) throw new Error("the eventful board has questions");
  const actions: readonly AnswerAction[] = [
    { type: "keep" },
    { type: "move-frames", frameIds: ["frame-3", "frame-17"], toStackId: "stack-1-4" },
    { type: "move-frames", frameIds: ["frame-3"], toStackId: null },
    { type: "set-aside", frameIds: ["frame-3"], reason: "soft" },
    { type: "bring-back", frameIds: ["frame-66"] },
    { type: "choose-take", stackId: "stack-3-6-take-2" },
    { type: "merge-stacks", stackIds: ["stack-3-6", "stack-3-6-take-2"] },
    { type: "split-stack", stackId: "stack-1-3", atFrameId: "frame-15" },
    { type: "new-stack", frameIds: ["frame-17", "frame-20"] },
    { type: "take-out", stackIds: ["stack-3-6", "stack-3-6-take-2", "stack-1-1"] },
  ];
  const answers = actions.map((action) => ({ label: action.type, action }));
  return { ...board, questions: [...board.questions, { ...first, id: "question-all", key: "all", answers }] };
}

test("every kind of answer can be given, settles its question, and says so where it makes a stack", () => {
  const question = START.questions.find(({ id }) => id === "question-all");
  question?.answers.forEach(({ label }, answer) => {
    const target = { kind: "question", questionId: "question-all", answer, newStackId: "new-1" } as const;
    const command = { id: crypto.randomUUID(), revision: 0, type: "settle", target } as const;
    const after = applyChanges(START, planCommand(START, command));
    expect(
      after.questions.map(({ id }) => id),
      label,
    ).not.toContain("question-all");
    expectWhole(after);
    const isMade = after.stacks.some(({ id }) => id === "new-1");
    expect(isMade, label).toBe(label === "split-stack" || label === "new-stack");
    if (isMade) {
      const unnamed = { ...command, target: { ...target, newStackId: undefined } };
      expect(() => planCommand(START, unnamed)).toThrow(ChangeConflict);
    }
  });
});

test("stacks that are taken out of the grid keep their frames", () => {
  const target = { kind: "question", questionId: "question-all", answer: 9 } as const;
  const command = { id: crypto.randomUUID(), revision: 0, type: "settle", target } as const;
  const after = applyChanges(START, planCommand(START, command));
  const out = after.stacks.filter(({ row }) => row === null).map(({ id }) => id);
  expect(out).toEqual(["stack-1-1", "stack-3-6", "stack-3-6-take-2"]);
  expect(after.frames.map(({ stackId }) => stackId)).toEqual(START.frames.map(({ stackId }) => stackId));
});

function canonical(board: Board): Board {
  return applyChanges(board, []);
}
