import { expect, test } from "vitest";
import { type DecidedBoard, inheritedShares, sortingFacts } from "@/lib/board/sorting-facts";

const stack = (id: string, column: number | null, more: object = {}) => ({
  id,
  row: column === null ? null : 1,
  column,
  take: 1,
  isChosenTake: true,
  referenceId: `${id}1`,
  isSettled: false,
  placedBy: "computation" as const,
  ...more,
});
const frame = (id: string, stackId: string | null, more: object = {}) => ({
  id,
  orderTaken: null,
  stackId,
  setAside: null,
  placedBy: "computation" as const,
  ...more,
});

const BOARD: DecidedBoard = {
  stacks: [
    stack("untouched", 1),
    stack("settled", 2, { isSettled: true }),
    stack("placed", 3, { placedBy: "person" }),
    stack("holds", 4),
    stack("reference", 5),
    stack("take", 6),
    stack("undone", 7),
    stack("empty", null),
  ],
  frames: [
    ...["untouched", "settled", "placed", "holds", "reference", "take", "undone"].map((id) => frame(`${id}1`, id)),
    frame("holds2", "holds", { placedBy: "person", setAside: "by hand" }),
    frame("loose", null, { placedBy: "person" }),
    frame("computed loose", null),
  ],
  grid: { rows: 2, columns: 7 },
  settledQuestionKeys: ["few-frames holds"],
  choices: {
    references: new Map([
      ["reference", "reference1"],
      // Chosen once; another is the reference now.
      ["undone", "undone9"],
    ]),
    takes: new Set(["take"]),
  },
};

test("ordinarily every stack with frames is a fact", () => {
  const facts = sortingFacts(BOARD, false);
  expect(facts.stacks.map(({ id }) => id)).toEqual([
    "untouched",
    "settled",
    "placed",
    "holds",
    "reference",
    "take",
    "undone",
  ]);
  expect(facts.stacks.filter(({ byPerson }) => byPerson).map(({ id }) => id)).toEqual(["settled", "placed"]);
  expect(facts.stacks.flatMap(({ id, referenceId }) => (referenceId ? [[id, referenceId]] : []))).toEqual([
    ["reference", "reference1"],
  ]);
  expect(facts.looseFrameIds).toEqual(["loose"]);
  // Whoever chose a frame as the reference wants it in use.
  expect(facts.setAside).toEqual({ holds2: "by hand", loose: null, reference1: null });
  expect(facts.grid).toEqual({ rows: 2, columns: 7 });
});

test("anew, only what people touched", () => {
  const facts = sortingFacts(BOARD, true);
  expect(facts.stacks.map(({ id }) => id)).toEqual(["settled", "placed", "holds", "reference", "take"]);
  expect(facts.looseFrameIds).toEqual(["loose"]);
  expect(facts.settledQuestionKeys).toEqual(["few-frames holds"]);
  // The second row is empty: somebody added it. The columns are as many as the stacks made.
  expect(facts.grid).toEqual({ rows: 2, columns: 0 });
});

test("a stack made anew is merged by whoever merged most of its frames", () => {
  const shares = new Map([
    ["a", "Ada"],
    ["b", "Ada"],
    ["c", "Ben"],
  ]);
  const proposed = [
    { id: "one", frameIds: ["a", "b", "c"] },
    { id: "two", frameIds: ["c", "d"] },
  ];
  expect([...inheritedShares(proposed, shares)]).toEqual([["one", "Ada"]]);
});
