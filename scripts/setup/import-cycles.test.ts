import { expect, test } from "vitest";
import { findCycles } from "./import-cycles.mjs";

const graph = (edges: Record<string, string[]>) => new Map(Object.entries(edges));

test("a way that leads back is found once, with everything on it", () => {
  expect(findCycles(graph({ a: ["b"], b: ["c"], c: ["b", "d"], d: [] }))).toEqual([["b", "c", "b"]]);
  expect(findCycles(graph({ a: ["a"] }))).toEqual([["a", "a"]]);
});

test("two ways to one file are no circle", () => {
  expect(findCycles(graph({ a: ["b", "c"], b: ["d"], c: ["d"], d: [] }))).toEqual([]);
});
