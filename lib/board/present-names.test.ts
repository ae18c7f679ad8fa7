import { describe, expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import { applyChanges, invertChanges } from "@/lib/board/changes";
import { boardCommandSchema, type CommandDraft, type PlannedCommand } from "@/lib/board/command-schema";
import type { Board, BoardQuestion } from "@/lib/board/model";
import { holeToken, stackToken, tileToken } from "@/lib/board/name-tokens";
import { planCommand } from "@/lib/board/plan-command";
import { withPresentNames } from "@/lib/board/present-names";
import { describeCommand } from "@/lib/board/sentence";
import { describeSubject } from "@/lib/board/subject-words";
import { buildManifest } from "@/lib/handover/manifest";
import { makeEventfulBoard } from "@/tests/support/make-board";

// 3 rows of 6 tiles, six frames each, B5 a hole, C6 with a second take.
const HOLE = holeToken({
  row: { stackIds: ["stack-2-4", "stack-2-3", "stack-2-2"], further: 0 },
  column: { stackIds: ["stack-1-5", "stack-3-5"], further: 0 },
});
const ASKED: BoardQuestion = {
  id: "between",
  key: "between",
  kind: "between-stacks",
  message: `Does HARB0019 belong to ${stackToken("stack-1-3")} or to ${stackToken("stack-1-4")}?`,
  evidence: `Taken at ${tileToken("stack-1-3")}.`,
  frameIds: ["frame-17"],
  stackIds: ["stack-1-3", "stack-1-4"],
  tile: tileToken("stack-1-3"),
  answers: [{ label: `Keep in ${stackToken("stack-1-3")}`, action: { type: "keep" } }],
  severity: 2,
};
const MISSING: BoardQuestion = {
  ...ASKED,
  id: "hole",
  key: "hole",
  kind: "hole",
  message: `Is a stack missing at ${HOLE}?`,
  evidence: "No frame shows it.",
  frameIds: [],
  stackIds: [],
  tile: HOLE,
  answers: [{ label: `Leave ${HOLE} empty`, action: { type: "keep" } }],
  severity: 1,
};
const EVENTFUL = makeEventfulBoard();
const BOARD: Board = { ...EVENTFUL, questions: [ASKED, MISSING] };

function planned(draft: CommandDraft): PlannedCommand {
  const command = boardCommandSchema.parse({ ...draft, id: "5f0c3f8e-58c9-4dd1-9a0e-0d8b3c3a2f11", revision: 1 });
  return command as PlannedCommand;
}

function after(board: Board, ...drafts: readonly CommandDraft[]): Board {
  return drafts.reduce((now, draft) => applyChanges(now, planCommand(now, planned(draft))), board);
}

const place = (stackId: string, row: number, column: number, occupied: "refuse" | "swap" = "refuse"): CommandDraft => ({
  type: "place-stack",
  stackId,
  place: { row, column },
  occupied,
});
const addLine = (axis: "row" | "column", at: number): CommandDraft => ({ type: "add-line", axis, at });

function read(board: Board): Record<string, string> {
  const { questions } = withPresentNames(board);
  return Object.fromEntries(
    questions.map(({ id, message, evidence, tile, answers }) => [
      id,
      `${tile}: ${message} ${evidence} ${answers.map(({ label }) => label).join()}`,
    ]),
  );
}

/** Tile and message of the hole's question, which must name the same. */
const holeAt = (board: Board) =>
  read(board).hole?.replace(/^(\S+): Is a stack missing at \1\?.* Leave \1 empty$/, "$1");

describe("what is said of stacks", () => {
  test("names the tiles where they lie now", () => {
    expect(read(BOARD).between).toBe("A3: Does HARB0019 belong to A3 or to A4? Taken at A3. Keep in A3");
    const shifted = after(BOARD, addLine("row", 1), addLine("column", 4));
    expect(read(shifted).between).toBe("B3: Does HARB0019 belong to B3 or to B5? Taken at B3. Keep in B3");
    const swapped = after(BOARD, place("stack-1-3", 3, 1, "swap"));
    expect(read(swapped).between).toBe("C1: Does HARB0019 belong to C1 or to A4? Taken at C1. Keep in C1");
  });

  test("tells takes apart, and a stack without a place by its first frame", () => {
    const reason = `${stackToken("stack-3-6-take-2")}; ${tileToken("stack-3-6-take-2")}; ${stackToken("no-such")}`;
    const board = { ...BOARD, stacks: BOARD.stacks.map((stack) => ({ ...stack, reason })) };
    expect(withPresentNames(board).stacks[0]?.reason).toBe("C6, take 2; C6; a stack that is gone");
    const out = after(BOARD, { type: "place-stack", stackId: "stack-1-3", place: null });
    const first = EVENTFUL.frames.find(({ stackId }) => stackId === "stack-1-3")?.name ?? "";
    expect(read(out).between).toContain(`Does HARB0019 belong to the stack from ${first} or to A4?`);
    expect(read(out).between).toMatch(/^null: /);
  });

  test("stays as it is where it was stored as names, or only looks like a token", () => {
    expect(withPresentNames(EVENTFUL)).toEqual(EVENTFUL);
    expect(withPresentNames(EVENTFUL).frames[0]).toBe(EVENTFUL.frames[0]);
    const odd = { ...ASKED, message: "Does {a} belong to {stack:}, {tile} or {}?" };
    expect(withPresentNames({ ...BOARD, questions: [odd] }).questions[0]?.message).toBe(odd.message);
  });
});

describe("a hole", () => {
  test("shifts with lines before it, not with those beyond", () => {
    expect(holeAt(BOARD)).toBe("B5");
    expect(holeAt(after(BOARD, addLine("row", 2), addLine("column", 1)))).toBe("C6");
    expect(holeAt(after(BOARD, addLine("row", 3), addLine("column", 6)))).toBe("B5");
    // Right between the hole and the stack beside it.
    expect(holeAt(after(BOARD, addLine("column", 5)))).toBe("B6");
    expect(holeAt(after(BOARD, addLine("column", 5), { type: "remove-line", axis: "column", at: 5 }))).toBe("B5");
  });

  test("is where it was when a step is taken back", () => {
    const changes = planCommand(BOARD, planned(addLine("row", 1)));
    const there = applyChanges(BOARD, changes);
    expect(holeAt(there)).toBe("C5");
    expect(holeAt(applyChanges(there, invertChanges(changes)))).toBe("B5");
  });

  test("stays where it is when a stack that tells its place is moved", () => {
    expect(holeAt(after(BOARD, place("stack-2-4", 1, 1, "swap")))).toBe("B5");
    expect(holeAt(after(BOARD, { type: "place-stack", stackId: "stack-1-5", place: null }))).toBe("B5");
  });

  test("in an empty line counts from the line before it", () => {
    const tile = holeToken({
      row: { stackIds: ["stack-3-1"], further: 1 },
      column: { stackIds: [], further: 2 },
    });
    const board = { ...BOARD, questions: [{ ...MISSING, tile }] };
    expect(withPresentNames(board).questions[0]?.tile).toBe("D2");
    expect(withPresentNames(after(board, addLine("row", 1))).questions[0]?.tile).toBe("E2");
  });

  test("without any stack that tells its place is nowhere", () => {
    const tile = holeToken({ row: { stackIds: ["gone"], further: 0 }, column: { stackIds: ["gone"], further: 0 } });
    const board = { ...BOARD, questions: [{ ...MISSING, tile, message: `Is one missing at ${tile}?` }] };
    expect(read(board).hole).toMatch(/^null: Is one missing at a place that is gone\?/);
  });

  test("filled by a stack is not asked about, and may be asked about by the next sorting should it leave", () => {
    const shifted = after(BOARD, addLine("row", 1));
    const changes = planCommand(shifted, planned(place("stack-3-6", 3, 5)));
    const closing = { on: "question", question: MISSING, isOpen: false, isWithdrawn: true };
    expect(changes.filter(({ on }) => on === "question")).toEqual([closing]);
    // Where it was before the row came in, another stack lies: putting one there is no answer.
    expect(after(shifted, place("stack-3-6", 2, 5, "swap")).questions.map(({ id }) => id)).toContain("hole");
  });
});

describe("present names are", () => {
  const shifted = after(BOARD, addLine("row", 1));

  test("on the board that is drawn: at the tile, at the hole", () => {
    const index = indexBoard(shifted);
    expect(index.tiles.get("B3")?.questions.map(({ message }) => message)).toEqual([
      "Does HARB0019 belong to B3 or to B4?",
    ]);
    expect(index.holes.get("C5")?.questions.map(({ message }) => message)).toEqual(["Is a stack missing at C5?"]);
    expect(JSON.stringify(index.board)).not.toMatch(/\{(stack|tile|hole):/);
  });

  test("in the sentence of a settling and in what is said of an open question", () => {
    const command = planned({ type: "settle", target: { kind: "question", questionId: "hole", answer: 0 } });
    const settled = applyChanges(shifted, planCommand(shifted, command));
    const telling = { before: shifted, after: settled, nameOf: () => "Ada" };
    expect(describeCommand(command, telling)).toBe('answered "Is a stack missing at C5?" with "Leave C5 empty"');
    expect(describeSubject(shifted, "hole")).toBe("“Is a stack missing at C5?” is open");
  });

  test("in the manifest", () => {
    const { toSettle } = buildManifest(shifted, { createdAt: "2026-05-09T10:00:00.000Z", hasProjectId: true });
    expect(toSettle.map(({ message, tile }) => `${tile} ${message}`)).toEqual([
      "B3 Does HARB0019 belong to B3 or to B4?",
      "C5 Is a stack missing at C5?",
    ]);
  });
});
