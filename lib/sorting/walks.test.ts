import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { findShotOrder, walkIndex, walkLabel, WALKS } from "./walks";

const boxOfSize = (rows: number, columns: number) => ({ top: 1, left: 1, bottom: rows, right: columns });

describe("walks", () => {
  test("a serpentine of 3 rows of 4 from the top left", () => {
    // check-values.md E42 (constructed).
    const walk = { along: "rows", from: "top-left", turns: true } as const;
    const places = Array.from({ length: 12 }, (_, index) => walkLabel(walk, index, boxOfSize(3, 4)));
    expect(places.map(({ row, column }) => `${row},${column}`).join(" ")).toBe(
      "1,1 1,2 1,3 1,4 2,4 2,3 2,2 2,1 3,1 3,2 3,3 3,4",
    );
  });

  test("there are sixteen", () => expect(new Set(WALKS.map((walk) => JSON.stringify(walk))).size).toBe(16));

  test("index and label undo each other, beyond the box too", () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...WALKS),
        fc.integer({ min: 1, max: 9 }),
        fc.integer({ min: 1, max: 9 }),
        fc.integer({ min: -50, max: 120 }),
        (walk, rows, columns, index) => {
          const box = boxOfSize(rows, columns);
          return walkIndex(walk, walkLabel(walk, index, box), box) === index;
        },
      ),
    );
  });
});

describe("findShotOrder", () => {
  test.each(WALKS)("recognises $along from $from, turns $turns, with a hole", (walk) => {
    const places = Array.from({ length: 12 }, (_, index) => walkLabel(walk, index, boxOfSize(3, 4)));
    places.splice(5, 1);
    expect(findShotOrder([places])).toEqual(walk);
  });

  test("finds none in a jumble, in a single tile, in nothing", () => {
    const jumble = [3, 9, 1, 7, 0, 11, 5, 2, 10, 4, 8, 6].map((index) =>
      walkLabel({ along: "rows", from: "top-left", turns: false }, index, boxOfSize(3, 4)),
    );
    expect(findShotOrder([jumble])).toBeNull();
    expect(findShotOrder([[{ row: 1, column: 1 }]])).toBeNull();
    expect(findShotOrder([])).toBeNull();
  });
});
