import { expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import { findFrames } from "@/lib/board/find-frames";
import { makeEventfulBoard } from "@/tests/support/make-board";

const INDEX = indexBoard(makeEventfulBoard());
const names = (typed: string, most = 3) => findFrames(INDEX, typed, most).map(({ frame }) => frame.name);

test("a frame is found by its name, capitals or not, or by its number", () => {
  expect(names("harb0019", 1)).toEqual(["HARB0019"]);
  expect(names("19")[0]).toBe("HARB0019");
  // The number itself before names that only end with it.
  expect(names("5")).toEqual(["HARB0005", "HARB0015", "HARB0025"]);
  expect(names("  0104 ")).toEqual(["HARB0104"]);
  expect(names("")).toEqual([]);
  expect(names("no such frame")).toEqual([]);
});

test("it says in which tile the frame lies, or that it is loose", () => {
  expect(findFrames(INDEX, "HARB0019", 1)[0]?.tile).toBe("A3");
  expect(findFrames(INDEX, "HARB0104", 1)[0]?.tile).toBeNull();
});
