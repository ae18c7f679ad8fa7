import { expect, test } from "vitest";
import { tileName } from "@/lib/board/tile-name";

test("a tile is named by row letter and column number, letters counted as spreadsheets do", () => {
  // product.md, "tile": A1 is the top left, B3 row 2 column 3, AA1 row 27.
  expect([
    tileName(1, 1),
    tileName(2, 3),
    tileName(26, 1),
    tileName(27, 1),
    tileName(702, 1),
    tileName(703, 2),
  ]).toEqual(["A1", "B3", "Z1", "AA1", "ZZ1", "AAA2"]);
});

test("a place outside the grid has no name", () => {
  expect(() => tileName(0, 1)).toThrow(RangeError);
  expect(() => tileName(1, 1.5)).toThrow(RangeError);
});
