import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import { indexBoard, type BoardIndex } from "@/lib/board/board-index";
import { applyChanges } from "@/lib/board/changes";
import { boardCommandSchema, type PlannedCommand } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { parseMoveTo } from "@/lib/board/move-to";
import {
  commandFor,
  startTarget,
  stepTarget,
  targetOfName,
  ZONE_BAND,
  zoneAt,
  type Moving,
  type Target,
} from "@/lib/board/moving";
import { growthToConfirm, nameOfMoved, outcomeOf } from "@/lib/board/outcome";
import { planCommand } from "@/lib/board/plan-command";
import { railRuns } from "@/lib/board/rail";
import { moveBoundary, stepsTo } from "@/lib/board/rail-boundary";
import { framesNotSettled, framesOfLine, rangeOf, softFrames } from "@/lib/board/selection";
import { makeEventfulBoard } from "@/tests/support/make-board";

const BOARD = makeEventfulBoard();
const INDEX = indexBoard(BOARD);
const frame = (...numbers: number[]): Moving => ({ kind: "frames", frameIds: numbers.map((at) => `frame-${at}`) });
const stack = (id: string): Moving => ({ kind: "stack", stackId: id });
const place = (name: string, occupied?: "swap" | "push" | "take"): Target => {
  const target = targetOfName(INDEX, name);
  if (target?.kind !== "place") throw new Error(`${name} is no place`);
  return occupied ? { ...target, occupied } : target;
};

/** The board after the command that putting it down would send. */
function after(board: BoardIndex, moving: Moving, target: Target): BoardIndex | null {
  const draft = commandFor(board, moving, target, "new-stack-id");
  if (!draft) return null;
  const parsed = boardCommandSchema.parse({ ...draft, id: crypto.randomUUID(), revision: 1 });
  return indexBoard(applyChanges(board.board, planCommand(board.board, parsed as PlannedCommand)));
}

describe("what would happen is said before it happens", () => {
  test.each([
    [frame(17), "A4", "It would go from A3 to A4. A4 would have 7 frames."],
    [frame(17, 16), "B5", "They would go from A3 to a new stack in B5. B5 would have 2 frames."],
    [frame(0, 6, 12), "A4", "They would go from 3 places to A4. A4 would have 9 frames."],
    [
      frame(12, 13, 14),
      "A4",
      "They would go from A3 to A4. A4 would have 9 frames. A3 would have 3 in use, fewer than 4.",
    ],
    [frame(12, 13, 14, 15, 16, 17), "A4", "They would go from A3 to A4. A4 would have 12 frames. A3 would be a hole."],
    [
      frame(17),
      "D1",
      "It would go from A3 to a new stack in D1. D1 would have 1 frame. The grid would reach to row D.",
    ],
    [frame(17), "A3", "It is in A3 already."],
    [stack("stack-1-3"), "B5", "It would be placed in B5. A3 would be a hole."],
    [stack("stack-1-3"), "A3", "It is in A3 already."],
    [stack("stack-1-3"), "A4", "A4 has a stack: what happens to it is asked."],
  ] as const)("%j to %s", (moving, name, sentence) => {
    expect(outcomeOf(INDEX, moving, place(name)).sentence).toBe(sentence);
  });

  test("loose, and out of the grid", () => {
    expect(outcomeOf(INDEX, frame(17), { kind: "loose" })).toMatchObject({
      caption: "5 frames would be loose",
      sentence: "It would be taken out of A3 and be loose.",
    });
    expect(outcomeOf(INDEX, frame(99), { kind: "loose" }).state).toBe("possible");
    expect(outcomeOf(INDEX, frame(102), { kind: "loose" }).sentence).toBe("It is loose already.");
    expect(outcomeOf(INDEX, stack("stack-3-6"), { kind: "out" }).sentence).toBe(
      "It would be taken out of the grid. C6 would show take 2.",
    );
  });

  test("the three answers for a place that is taken", () => {
    const say = (occupied: "swap" | "push" | "take") =>
      outcomeOf(INDEX, stack("stack-1-1"), place("B3", occupied)).sentence;
    expect(say("swap")).toBe("It would be placed in B3, and B3 in A1.");
    expect(say("push")).toBe("It would be placed in B3. B3 to B4 would go one place to the right. A1 would be a hole.");
    expect(say("take")).toBe("It would be take 2 of B3, not in the merge until it is chosen. A1 would be a hole.");
    expect(outcomeOf(INDEX, stack("stack-1-1"), place("A5", "push")).sentence).toBe(
      "It would be placed in A5. A5 to A6 would go one place to the right. The grid would reach to column 7. A1 would be a hole.",
    );
  });

  test("growth by more than one line is asked about, with the places it would leave empty", () => {
    // 3 rows of 6: A9 makes 27 places of 18, one of them taken.
    expect(growthToConfirm(INDEX, place("A9"))).toBe(
      "The grid would grow from 6 to 9 columns; 8 places would be empty.",
    );
    expect(growthToConfirm(INDEX, place("E7"))).toBe(
      "The grid would grow from 3 to 5 rows and from 6 to 7 columns; 16 places would be empty.",
    );
    expect(growthToConfirm(INDEX, place("A7"))).toBeNull();
    expect(growthToConfirm(INDEX, place("B5"))).toBeNull();
    expect(growthToConfirm(INDEX, { kind: "loose" })).toBeNull();
  });

  test("names of what is moved", () => {
    expect(nameOfMoved(INDEX, frame(17))).toBe("HARB0019");
    expect(nameOfMoved(INDEX, frame(17, 18))).toBe("HARB0019 and HARB0020");
    expect(nameOfMoved(INDEX, frame(17, 18, 19))).toBe("3 frames");
    expect(nameOfMoved(INDEX, stack("stack-1-3"))).toBe("A3 (6 frames)");
  });
});

describe("what is said is what the command does", () => {
  const names = [...INDEX.tiles.keys(), "B5", "D1", "A7", "D7", "loose"];
  const target = fc
    .tuple(fc.constantFrom(...names), fc.constantFrom(undefined, "swap", "push", "take"))
    .map(([name, occupied]): Target => (name === "loose" ? { kind: "loose" } : place(name, occupied)));
  const moving = fc.oneof(
    fc
      .uniqueArray(fc.constantFrom(...BOARD.frames.map(({ id }) => id)), { minLength: 1, maxLength: 8 })
      .map((frameIds): Moving => ({ kind: "frames", frameIds })),
    fc.constantFrom(...BOARD.stacks.filter(({ id }) => INDEX.framesOfStack.has(id))).map(({ id }) => stack(id)),
  );

  // The oracle is planCommand, which server and browser share.
  test("counts, holes and growth agree with the planned command", () => {
    fc.assert(
      fc.property(moving, target, (what, where) => {
        const said = outcomeOf(INDEX, what, where);
        const then = after(INDEX, what, where);
        expect(said.state === "possible").toBe(then !== null);
        if (!then) return;
        const [, name = "", count = ""] = /(\b[A-Z]{1,2}\d+) would have (\d+) frames?\./.exec(said.sentence) ?? [];
        if (name !== "") expect(then.tiles.get(name)?.frames.length).toBe(Number(count));
        const saidHoles = [...said.sentence.matchAll(/([A-Z]+\d+) would be a hole/g)].map(([, hole = ""]) => hole);
        for (const hole of saidHoles) expect(then.holes.has(hole)).toBe(true);
        // Those beyond the old grid are new places, not losses.
        const newHoles = [...then.holes.values()].filter(
          ({ name: hole, row, column }) => !INDEX.holes.has(hole) && row <= 3 && column <= 6,
        );
        if (!said.sentence.includes("more would be left")) expect(saidHoles.length).toBe(newHoles.length);
        const grown = then.board.grid.rows > 3 || then.board.grid.columns > 6;
        expect(said.sentence.includes("The grid would reach")).toBe(grown);
      }),
      { numRuns: 500 },
    );
  });
});

describe("Move to", () => {
  const parse = (text: string, moving: Moving = frame(17)) => parseMoveTo(INDEX, moving, text);
  test("takes tile names and words, however they are written", () => {
    expect(parse(" a4 ")).toEqual({ target: { kind: "place", row: 1, column: 4 } });
    expect(parse("aa 12")).toEqual({ target: { kind: "place", row: 27, column: 12 } });
    expect(parse("LOOSE")).toEqual({ target: { kind: "loose" } });
    expect(parse("new  stack")).toEqual({ target: { kind: "new-stack" } });
    expect(parse("no place", stack("stack-1-1"))).toEqual({ target: { kind: "out" } });
  });
  test("says in words what is wrong", () => {
    expect(parse("")).toEqual({ problem: null });
    expect(parse("4a")).toEqual({ problem: "The row's letters come first: A4." });
    expect(parse("over there")).toEqual({
      problem: "There is no place called over there. Write a tile as A4, or one of the words below.",
    });
    expect(parse("A201")).toEqual({ problem: "A grid reaches to row GR and column 200 at the most." });
    expect(parse("no place")).toEqual({ problem: expect.stringMatching(/loose/) });
    expect(parse("new stack", stack("stack-1-1"))).toEqual({ problem: expect.stringMatching(/already/) });
  });
  test("a stack without a place is named as the board names it", () => {
    const out: Board = {
      ...BOARD,
      stacks: BOARD.stacks.map((each) => (each.id === "stack-1-1" ? { ...each, row: null, column: null } : each)),
    };
    expect(parseMoveTo(indexBoard(out), frame(17), "stack 1")).toEqual({
      target: { kind: "stack", stackId: "stack-1-1" },
    });
  });
});

describe("by arrow keys", () => {
  test("it begins where the frame lies and goes from place to place, holes and one new line included", () => {
    expect(startTarget(INDEX, frame(17))).toEqual(place("A3"));
    expect(stepTarget(INDEX, place("B4"), "ArrowRight")).toEqual(place("B5"));
    expect(stepTarget(INDEX, place("C6"), "ArrowDown")).toEqual({ kind: "place", row: 4, column: 6 });
    expect(stepTarget(INDEX, { kind: "place", row: 4, column: 6 }, "ArrowDown")).toBeNull();
    expect(stepTarget(INDEX, place("C6"), "ArrowRight")).toEqual({ kind: "place", row: 3, column: 7 });
    expect(stepTarget(INDEX, place("A3"), "ArrowUp")).toEqual({ kind: "loose" });
    expect(stepTarget(INDEX, { kind: "loose" }, "ArrowDown")).toEqual(place("A1"));
    expect(stepTarget(INDEX, place("A3"), "x")).toBeNull();
  });
  test("a taken tile's middle swaps, its right edge makes room, its lower edge is another take; a small one asks later", () => {
    const box = { width: 150, height: 120 };
    const at = (x: number, y: number) => zoneAt(box, { x, y });
    expect([at(75, 60), at(5, 5), at(110, 88)]).toEqual(["swap", "swap", "swap"]);
    expect([at(120, 60), at(149, 5)]).toEqual(["push", "push"]);
    expect([at(75, 100), at(149, 119)]).toEqual(["take", "take"]);
    // The middle is the largest of the three by far.
    expect((1 - ZONE_BAND) ** 2).toBeGreaterThan(0.5);
    expect(zoneAt({ width: 60, height: 60 }, { x: 10, y: 10 })).toBeUndefined();
  });
});

describe("the boundary between two brackets", () => {
  const [a1, a2] = railRuns(BOARD.frames, BOARD.grid.longestPauseSeconds);
  if (!a1 || !a2) throw new Error("the recipe has two stacks");
  test("later takes the next stack's first frames, earlier gives the last ones away", () => {
    expect(moveBoundary(a1, a2, 1)).toEqual({
      moving: frame(6),
      target: { kind: "stack", stackId: "stack-1-1" },
    });
    expect(moveBoundary(a1, a2, -2)).toEqual({
      moving: frame(4, 5),
      target: { kind: "stack", stackId: "stack-1-2" },
    });
    expect(moveBoundary(a1, a1, 1)).toBeNull();
    expect(moveBoundary(a1, a2, 0)).toBeNull();
  });
  test("dragging it onto a line counts the frames between", () => {
    expect(stepsTo(a1, a2, "frame-5", true)).toBe(0);
    expect(stepsTo(a1, a2, "frame-5", false)).toBe(-1);
    expect(stepsTo(a1, a2, "frame-6", true)).toBe(1);
    expect(stepsTo(a1, a2, "frame-50", true)).toBeNull();
  });
});

describe("many at once", () => {
  test("a range runs in the order taken, either way", () => {
    const order = ["a", "b", "c", "d"];
    expect(rangeOf(order, "c", "b")).toEqual(["b", "c"]);
    expect(rangeOf(order, "b", "d")).toEqual(["b", "c", "d"]);
    expect(rangeOf(order, "gone", "d")).toEqual(["d"]);
    expect(rangeOf(order, null, "d")).toEqual(["d"]);
    expect(rangeOf(order, "a", "gone")).toEqual([]);
  });
  test("all soft, all in a row, all that is not settled", () => {
    expect(softFrames(INDEX)).toEqual(["frame-8"]);
    expect(framesOfLine(INDEX, "row", 2)).toHaveLength(30);
    expect(framesOfLine(INDEX, "column", 5)).toHaveLength(12);
    expect(framesNotSettled(INDEX)).toHaveLength(102);
  });
});
