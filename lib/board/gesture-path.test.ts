import { expect, test } from "vitest";
import { gesturePath } from "@/lib/board/gesture-path";

const FRAME = { left: 900, top: 300, width: 100, height: 120 };

test("to a tile above: from the top of the frame to below the tile, its head pointing up", () => {
  const { line, head } = gesturePath(FRAME, { left: 500, top: 0, width: 200, height: 195 });
  expect(line).toMatch(/^M 950 300 C 950 240 600 260 600 200$/);
  expect(head).toBe("M 594 209 L 600 200 L 606 209");
});

test("to a tile below: from the foot of the frame to above the tile, its head pointing down", () => {
  const { line, head } = gesturePath(FRAME, { left: 500, top: 525, width: 200, height: 195 });
  expect(line).toMatch(/^M 950 420 C 950 480 600 460 600 520$/);
  expect(head).toBe("M 594 511 L 600 520 L 606 511");
});
