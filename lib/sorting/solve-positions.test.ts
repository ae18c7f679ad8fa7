import { expect, test } from "vitest";
import { solvePositions } from "./solve-positions";

test("agrees with a triangle worked by hand", () => {
  // Wanted: 0 to 1 is 10, 1 to 2 is 10, 0 to 2 is 23, equal weights. The 3 too much are shared: 11, 11, 22.
  const edges = [
    { a: 0, b: 1, x: 10, y: 0, weight: 1 },
    { a: 1, b: 2, x: 10, y: 0, weight: 1 },
    { a: 0, b: 2, x: 23, y: 0, weight: 1 },
  ];
  const origin = { x: 0, y: 0 };
  const [a, b, c] = solvePositions([origin, origin, origin], edges);
  expect((b?.x ?? 0) - (a?.x ?? 0)).toBeCloseTo(11, 6);
  expect((c?.x ?? 0) - (b?.x ?? 0)).toBeCloseTo(11, 6);
});

test("what no edge touches stays where it was", () => {
  expect(solvePositions([{ x: 3, y: 4 }], [])).toEqual([{ x: 3, y: 4 }]);
});
