import { expect } from "vitest";
import type { Board } from "@/lib/board/model";
import { requireWholeBoard } from "@/lib/board/whole-board";

/**
 * The product's own check finds nothing, and neither does this one, written apart from it: every frame in exactly one place, every stack with frames (but those that had none at the start), every place with
 * one stack a take and one chosen take.
 */
export function expectWhole(board: Board, start: Board): void {
  const ids = ({ frames }: Board) => frames.map(({ id }) => id).sort();
  expect(ids(board)).toEqual(ids(start));
  const emptyAtStart = emptyStacks(start);
  expect(emptyStacks(board).filter((id) => !emptyAtStart.includes(id))).toEqual([]);
  expect(() => requireWholeBoard(start, board)).not.toThrow();
  const outside = board.stacks.filter(({ row, column }) => {
    return (row ?? 0) > board.grid.rows || (column ?? 0) > board.grid.columns;
  });
  expect(outside).toEqual([]);
  const stackIds = new Set(board.stacks.map(({ id }) => id));
  expect(board.frames.filter(({ stackId }) => stackId !== null && !stackIds.has(stackId))).toEqual([]);
  const placed = board.stacks.filter(({ row }) => row !== null);
  const places = placed.map(({ row, column, take }) => `${row}/${column}/${take}`);
  expect(new Set(places).size).toBe(places.length);
  const chosen = new Map<string, number>();
  for (const { row, column, isChosenTake } of placed) {
    chosen.set(`${row}/${column}`, (chosen.get(`${row}/${column}`) ?? 0) + Number(isChosenTake));
  }
  expect([...chosen].filter(([, count]) => count !== 1)).toEqual([]);
}

function emptyStacks({ frames, stacks }: Board): string[] {
  const held = new Set(frames.map(({ stackId }) => stackId));
  return stacks.filter(({ id }) => !held.has(id)).map(({ id }) => id);
}
