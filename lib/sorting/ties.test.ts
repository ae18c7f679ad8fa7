import { expect, test } from "vitest";
import type { Edge } from "./edges";
import { findTies } from "./ties";

const STEPS = { right: { x: 0.7, y: 0 }, down: { x: 0, y: 0.5 } };
const NONE_PLAIN: ReadonlySet<number> = new Set();

function edge(a: number, b: number, columns: number, rows: number, weight: number): Edge {
  const shift = { x: columns * STEPS.right.x, y: rows * STEPS.down.y };
  return { a, b, ...shift, ncc: 0.8, significance: 20, rivals: [], isFaint: false, weight, steps: null };
}

/** Two rows of three: 0 1 2 above 3 4 5. */
const LABELS = new Map([0, 1, 2, 3, 4, 5].map((index) => [index, { column: index % 3, row: Math.floor(index / 3) }]));
const ROWS = [edge(0, 1, 1, 0, 30), edge(1, 2, 1, 0, 30), edge(3, 4, 1, 0, 30), edge(4, 5, 1, 0, 30)];

function tieOf(edges: readonly Edge[], members: readonly number[]) {
  const { ties } = findTies({ edges, steps: STEPS, components: [LABELS] }, LABELS, NONE_PLAIN);
  return ties.find((tie) => [...tie.members].sort().join() === members.join());
}

test("a row that hangs on the rest by one weak edge is told from its own strong ones", () => {
  const tie = tieOf([...ROWS, edge(1, 4, 0, 1, 3)], [3, 4, 5]) ?? tieOf([...ROWS, edge(1, 4, 0, 1, 3)], [0, 1, 2]);
  expect(tie?.agreeing).toBeCloseTo(3, 6);
  expect(tie?.rival).toBeNull();
});

test("what speaks for another place is added up, and says where", () => {
  // 0 to 3 and 2 to 5 say that the lower row lies one column further left.
  const edges = [...ROWS, edge(1, 4, 0, 1, 20), edge(0, 3, -1, 1, 4), edge(2, 5, -1, 1, 5)];
  const lower = tieOf(edges, [3, 4, 5]);
  const upper = tieOf(edges, [0, 1, 2]);
  expect((lower ?? upper)?.against).toBeCloseTo(9, 6);
  expect((lower ?? upper)?.rival).toMatchObject({ columns: lower ? -1 : 1, rows: 0 });
});

test("stacks that no agreeing edge connects are pieces of their own", () => {
  const { pieces } = findTies({ edges: ROWS, steps: STEPS, components: [LABELS] }, LABELS, NONE_PLAIN);
  expect(pieces.map((piece) => [...piece].sort().join())).toEqual(["0,1,2", "3,4,5"]);
});
