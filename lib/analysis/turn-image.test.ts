import { expect, test } from "vitest";
import { turnImage } from "@/lib/analysis/turn-image";

test("a quarter turn clockwise takes the top edge to the right", () => {
  // 3 x 3, worked by hand: rows 1 2 3 / 4 5 6 / 7 8 9 become 7 4 1 / 8 5 2 / 9 6 3.
  const image = { data: Uint16Array.of(1, 2, 3, 4, 5, 6, 7, 8, 9), widthPx: 3, heightPx: 3 };
  expect([...turnImage(image, Math.PI / 2).data]).toEqual([7, 4, 1, 8, 5, 2, 9, 6, 3]);
});

test("no turn changes nothing, and one pixel stays", () => {
  const image = { data: Uint16Array.of(10, 20, 30, 40, 50, 60), widthPx: 3, heightPx: 2 };
  expect(turnImage(image, 0)).toEqual(image);
  const dot = { data: Uint16Array.of(7), widthPx: 1, heightPx: 1 };
  expect(turnImage(dot, 1)).toEqual(dot);
});

test("a constant picture stays constant, input untouched", () => {
  const image = { data: new Uint16Array(12).fill(500), widthPx: 4, heightPx: 3 };
  expect(turnImage(image, 0.3).data).toEqual(image.data);
});
