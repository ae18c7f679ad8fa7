import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import { applyChanges, invertChanges } from "@/lib/board/changes";
import { diffBoards } from "@/lib/board/diff-boards";
import type { Board } from "@/lib/board/model";
import { makeEventfulBoard } from "@/tests/support/make-board";

const BOARD = applyChanges(makeEventfulBoard(), []);

/** Any other board of the same frames: some lie elsewhere, stacks have other places, some are gone, some are new. */
function anyOther(): fc.Arbitrary<Board> {
  const stackIds = fc.uniqueArray(fc.constantFrom(...BOARD.stacks.map(({ id }) => id), "new-1", "new-2"), {
    minLength: 1,
  });
  return fc
    .record({ stackIds, seeds: fc.array(fc.nat(97), { minLength: 1, maxLength: 9 }), questions: fc.nat(3) })
    .map(({ stackIds: kept, seeds, questions }) => {
      const seed = (at: number) => seeds[at % seeds.length] ?? 0;
      const known = new Map(BOARD.stacks.map((stack) => [stack.id, stack]));
      const stacks = kept.map((id, at) => {
        const stack = known.get(id) ?? { ...BOARD.stacks[0], id };
        return { ...stack, row: at + 1, column: 1 + (seed(at) % 3), take: 1, isSettled: seed(at) % 2 === 0 };
      });
      const frames = BOARD.frames.map((frame, at) => ({
        ...frame,
        stackId: seed(at) % 4 === 0 ? null : (kept[(seed(at) + at) % kept.length] ?? null),
        setAside: seed(at) % 5 === 0 ? ("soft" as const) : null,
        shift: seed(at) % 3 === 0 ? null : { xPx: seed(at), yPx: at },
      }));
      const grid = { ...BOARD.grid, rows: kept.length, columns: 3 };
      return applyChanges({ ...BOARD, stacks, frames, grid, questions: BOARD.questions.slice(questions) } as Board, []);
    });
}

describe("the difference of two boards", () => {
  test("leads from the one to the other, and back", () => {
    fc.assert(
      fc.property(anyOther(), anyOther(), (before, after) => {
        const changes = diffBoards(before, after);
        expect(applyChanges(before, changes)).toEqual(after);
        expect(applyChanges(after, invertChanges(changes))).toEqual(before);
      }),
      { numRuns: 100 },
    );
  });

  test("of a board and itself, or an equal one, is nothing", () => {
    expect(diffBoards(BOARD, BOARD)).toEqual([]);
    expect(diffBoards(BOARD, structuredClone(BOARD) as Board)).toEqual([]);
  });

  test("counts a new frame as having been loose, so that taking it back leaves it loose", () => {
    const [first] = BOARD.frames;
    const before = { ...BOARD, frames: BOARD.frames.slice(1) };
    const changes = diffBoards(before, BOARD);
    expect(changes).toMatchObject([{ on: "frame", id: first?.id, before: { stackId: null } }]);
    const back = applyChanges(BOARD, invertChanges(changes));
    expect(back.frames[0]).toMatchObject({ id: first?.id, stackId: null, setAside: null });
  });
});
