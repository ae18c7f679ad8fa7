import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { namer } from "@/lib/board/name-tokens";
import { questionTile } from "@/lib/board/question-tile";
import {
  NO_FACTS,
  pretendInput,
  pretendShoot,
  toSortFrame,
  type PretendFrame,
  type PretendPlan,
} from "@/tests/support/accuracy/pretend-shoot";
import { sortFrames } from "./sort-frames";
import type { Proposal, SortFrame, SortInput } from "./types";
import { WALKS } from "./walks";

const PLAN: PretendPlan = {
  rows: 3,
  columns: 4,
  framesPerTile: 5,
  order: { along: "rows", from: "top-left", turns: true },
};

async function sort(frames: readonly PretendFrame[], change?: (input: SortInput) => SortInput): Promise<Proposal> {
  const { input, measurePair } = pretendInput(frames);
  return sortFrames(change ? change(input) : input, measurePair);
}

/** Stacks as "A1: names" lines, whatever the ids. */
function summary(proposal: Proposal, nameOf: (id: string) => string = (id) => id): string[] {
  return proposal.stacks
    .map(({ row, column, take, frameIds }) => `${row},${column},${take}: ${frameIds.map(nameOf).join(" ")}`)
    .sort();
}

/** Questions as they are read, with names in place of tokens. */
function questionsOf({ stacks, frames, questions }: Proposal) {
  const byId = new Map(stacks.map((stack) => [stack.id, stack]));
  const say = namer(
    byId,
    frames.map(({ id, stackId }) => ({ name: id, stackId })),
  );
  return questions.map((question) => ({
    ...question,
    message: say(question.message),
    tile: questionTile(question, byId),
  }));
}

const shuffled = <Item>(items: readonly Item[], seed: number): Item[] =>
  items
    .map((item, at) => ({ item, key: Math.sin(seed * 9999 + at * 77.7) }))
    .sort((a, b) => a.key - b.key)
    .map(({ item }) => item);

describe("a tidy shoot", () => {
  test("3 rows of 6 tiles of 6 frames are 108 frames in 18 stacks", async () => {
    // Common practice: a typical project.
    const proposal = await sort(pretendShoot({ ...PLAN, columns: 6, framesPerTile: 6 }));
    expect(proposal.frames).toHaveLength(108);
    expect(proposal.stacks.map(({ frameIds }) => frameIds.length)).toEqual(Array(18).fill(6));
    expect([proposal.rows, proposal.columns]).toEqual([3, 6]);
    expect(proposal.questions).toEqual([]);
    expect(proposal.seams).toHaveLength(27);
    for (const seam of proposal.seams) expect(seam.overlap).toBeCloseTo(1 / 3, 2);
  });

  test.each(
    WALKS.map((order) => [`${order.along} from ${order.from}${order.turns ? ", turning" : ""}`, order] as const),
  )("is placed and its order recognised when shot along %s", async (_, order) => {
    const frames = pretendShoot({ ...PLAN, order });
    const proposal = await sort(frames);
    expect(proposal.shotOrder).toEqual(order);
    for (const stack of proposal.stacks) {
      const first = frames.find((frame, at) => toSortFrame(frame, at).id === stack.frameIds[0]);
      expect(stack.column).toBe(Math.round((first?.at?.xPx ?? 0) / 2000) + 1);
      expect(stack.row).toBe(Math.round((first?.at?.yPx ?? 0) / (4000 / 3)) + 1);
    }
  });

  test("a mirrored shoot gives a mirrored grid", async () => {
    const frames = pretendShoot(PLAN);
    const mirrored = frames.map((frame) => ({ ...frame, at: frame.at && { ...frame.at, xPx: -frame.at.xPx } }));
    const [plain, mirror] = [await sort(frames), await sort(mirrored)];
    const columns = (proposal: Proposal) => proposal.stacks.map(({ column }) => column);
    expect(columns(mirror)).toEqual(columns(plain).map((column) => 5 - (column ?? 0)));
  });
});

describe("what must change nothing", () => {
  const frames = pretendShoot({ ...PLAN, isBlank: (row, column) => row === 1 && column < 3 });

  test("the order of the input", async () => {
    const expected = summary(await sort(frames));
    await fc.assert(
      fc.asyncProperty(fc.integer({ min: 1, max: 1e6 }), async (seed) => {
        const proposal = await sort(frames, (input) => ({ ...input, frames: shuffled(input.frames, seed) }));
        expect(summary(proposal)).toEqual(expected);
      }),
      { numRuns: 10 },
    );
  });

  test("another prefix, a counter shifted by a constant with its roll-over, a clock set wrong", async () => {
    const expected = summary(await sort(frames));
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom("ABCD", "_XYZ", "IMG_", "P100"),
        fc.integer({ min: 0, max: 9998 }),
        fc.integer({ min: -1e6, max: 1e6 }),
        async (prefix, offset, clock) => {
          const renamed = (frame: SortFrame, at: number): SortFrame => ({
            ...frame,
            name: `${prefix}${String(((at + offset) % 9999) + 1).padStart(4, "0")}`,
            metadata: {
              ...frame.metadata,
              takenAt: frame.metadata.takenAt && {
                ...frame.metadata.takenAt,
                localMs: frame.metadata.takenAt.localMs + clock * 1000,
              },
            },
          });
          const proposal = await sort(frames, (input) => ({ ...input, frames: input.frames.map(renamed) }));
          expect(summary(proposal)).toEqual(expected);
        },
      ),
      { numRuns: 15 },
    );
  });

  test("its input is not changed", async () => {
    const { input, measurePair } = pretendInput(frames);
    const before = structuredClone(input);
    await sortFrames(input, measurePair);
    expect(input).toEqual(before);
  });
});

describe("what goes wrong at a shoot", () => {
  test("an added stray stays loose, is asked about and moves nothing else", async () => {
    const frames = pretendShoot(PLAN);
    const expected = summary(await sort(frames));
    const stray: PretendFrame = { ...frames[0], name: "FRAM0999", at: null, seconds: 500 } as PretendFrame;
    const proposal = await sort([...frames, stray]);
    expect(summary(proposal)).toEqual(expected);
    expect(proposal.frames.filter(({ stackId }) => stackId === null)).toHaveLength(1);
    expect(proposal.questions.map(({ kind }) => kind)).toEqual(["stray"]);
  });

  test("a tile never shot is a hole and a question", async () => {
    const proposal = await sort(pretendShoot({ ...PLAN, isMissing: (row, column) => row === 2 && column === 2 }));
    expect(proposal.stacks).toHaveLength(11);
    expect(questionsOf(proposal).map(({ kind, tile }) => [kind, tile])).toEqual([["hole", "B2"]]);
  });

  test("a hole that is to stay empty is not asked about again where lines came in before it", async () => {
    const frames = pretendShoot({ ...PLAN, isMissing: (row, column) => row === 2 && column === 2 });
    const { stacks, questions, rows, columns } = await sort(frames);
    const facts = {
      ...NO_FACTS,
      stacks: stacks.map((stack) => ({
        ...stack,
        column: (stack.column ?? 0) + 1,
        byPerson: false,
        referenceId: null,
      })),
      grid: { rows, columns: columns + 1 },
    };
    const tilesAsked = async (settledQuestionKeys: readonly string[]) => {
      const again = await sort(frames, (input) => ({ ...input, facts: { ...facts, settledQuestionKeys } }));
      return questionsOf(again).map(({ message, tile }) => `${message} ${tile}`);
    };
    // B2 is B3 now; the column that came in is empty and asked about.
    expect(await tilesAsked(questions.map(({ key }) => key))).toEqual(
      ["A1", "B1", "C1"].map((tile) => `Is a stack missing at ${tile}? ${tile}`),
    );
    expect(await tilesAsked([])).toEqual(["Are stacks missing at these 4 places of the grid? A1"]);
  });

  test("a small overlap is asked about at the tile that it begins at", async () => {
    const shoot = pretendShoot({ ...PLAN, rows: 1 });
    // The last tile was aimed too far right, by so much that a fifth of the side is left.
    const frames = shoot.map((frame, at) => {
      const isLast = at >= shoot.length - PLAN.framesPerTile;
      return isLast && frame.at ? { ...frame, at: { ...frame.at, xPx: frame.at.xPx + 400 } } : frame;
    });
    const proposal = await sort(frames);
    const asked = questionsOf(proposal);
    expect(asked.map(({ kind, tile }) => [kind, tile])).toEqual([["thin-seam", "A3"]]);
    expect(asked[0]?.message).toContain("A3 and A4");
  });

  test("a row of plain sky takes its places from the order shot", async () => {
    for (const order of WALKS) {
      const proposal = await sort(pretendShoot({ ...PLAN, order, isBlank: (row) => row === 1 }));
      expect([proposal.rows, proposal.columns]).toEqual([3, 4]);
      expect(new Set(proposal.stacks.map(({ row, column }) => `${row} ${column}`)).size).toBe(12);
      expect(proposal.shotOrder).toEqual(order);
      // One question for the row as a whole where it begins or ends the shoot, none for each of its tiles.
      const asked = questionsOf(proposal).filter(({ kind }) => kind === "order");
      if (order.along === "rows") {
        expect(asked.map(({ message }) => message.replaceAll(/A\d/g, "A"))).toEqual([
          "Are A, A, A and A in their places?",
        ]);
      }
      for (const { tile } of asked) expect(tile).toMatch(/^A[1-4]$/);
    }
  });

  test("a tile with a long pause in it and far too many frames is asked about", async () => {
    const tidy = pretendShoot({ ...PLAN, framesPerTile: 6 });
    const frames = tidy.flatMap((frame, at) => {
      const more = [0, 1, 2, 3].map((extra) => ({
        ...frame,
        name: `FRAM0${500 + extra}`,
        seconds: (frame.seconds ?? 0) + 100 + extra,
      }));
      return at === tidy.length - 1 ? [frame, ...more] : [frame];
    });
    const proposal = await sort(frames);
    const asked = questionsOf(proposal).filter(({ kind }) => kind === "two-stacks");
    expect(asked.map(({ tile, frameIds }) => [tile, frameIds.length])).toEqual([["C4", 1]]);
    expect(asked[0]?.answers.map(({ action }) => action.type)).toEqual(["keep", "split-stack"]);
  });

  test("a tile shot again is a second take, the sharper one is chosen", async () => {
    const frames = pretendShoot(PLAN);
    const again = frames.slice(10, 15).map((frame, at) => ({
      ...frame,
      name: `FRAM0${500 + at}`,
      seconds: 900 + at,
      sharpness: 0.4,
    }));
    const proposal = await sort([...frames, ...again]);
    const takes = proposal.stacks.filter(({ row, column }) => row === 1 && column === 3);
    expect(takes.map(({ take, isChosenTake }) => [take, isChosenTake])).toEqual([
      [1, false],
      [2, true],
    ]);
    expect(proposal.questions).toEqual([]);
  });

  test("a soft frame is set aside and is never the reference", async () => {
    const frames = pretendShoot(PLAN).map((frame, at) => (at === 7 ? { ...frame, sharpness: -0.5 } : frame));
    const proposal = await sort(frames);
    const aside = proposal.frames.filter(({ setAside }) => setAside !== null);
    expect(aside.map(({ orderTaken, setAside }) => [orderTaken, setAside])).toEqual([[7, "soft"]]);
    expect(proposal.stacks.some(({ referenceId }) => referenceId === aside[0]?.id)).toBe(false);
  });
});

describe("little or nothing to sort", () => {
  const few = (count: number) =>
    pretendShoot({ ...PLAN, rows: 1, columns: 1, framesPerTile: Math.max(1, count) }).slice(0, count);

  test.each([0, 1, 2, 500])("%i frames of one tile", async (count) => {
    const proposal = await sort(few(count));
    expect(proposal.frames).toHaveLength(count);
    expect(proposal.stacks).toHaveLength(Math.min(1, count));
    if (count > 0) expect(proposal.stacks[0]).toMatchObject({ row: 1, column: 1, take: 1 });
  });

  test("nothing but plain sky, without any times", async () => {
    const frames = pretendShoot({ ...PLAN, isBlank: () => true }).map((frame) => ({ ...frame, seconds: null }));
    const proposal = await sort(frames);
    expect(proposal.frames).toHaveLength(frames.length);
    // Nothing tells where one tile ends: one question says so.
    expect(proposal.questions.filter(({ kind }) => kind === "between-stacks")).toHaveLength(1);
  });

  test("times that go backwards", async () => {
    const frames = pretendShoot(PLAN).map((frame) => ({ ...frame, seconds: -(frame.seconds ?? 0) }));
    expect((await sort(frames)).stacks).toHaveLength(12);
  });
});

describe("facts", () => {
  test("frames that come later join their stacks or make new ones; nothing else moves", async () => {
    const frames = pretendShoot(PLAN);
    const { input, measurePair } = pretendInput(frames);
    const early = input.frames.filter((_, at) => at >= 20 && at % 5 !== 2);
    const first = await sortFrames({ ...input, frames: early }, measurePair);
    const fixed = first.stacks.map(({ id, frameIds, row, column, take, isChosenTake }) => {
      return { id, frameIds, row, column, take, isChosenTake, byPerson: false };
    });
    const facts = { ...input.facts, stacks: fixed };
    const second = await sortFrames({ ...input, facts }, measurePair);
    expect(second.stacks).toHaveLength(12);
    expect(second.stacks.every(({ frameIds }) => frameIds.length === 5)).toBe(true);
    for (const stack of fixed) {
      const now = second.stacks.find(({ id }) => id === stack.id);
      // The first row came later: all are renumbered alike.
      expect([now?.row, now?.column]).toEqual([(stack.row ?? 0) + 1, stack.column]);
    }
  });

  test("a settled question is not asked again, and a person's set-aside holds", async () => {
    const frames = pretendShoot(PLAN).map((frame, at) => (at === 7 ? { ...frame, sharpness: -0.5 } : frame));
    const { input, measurePair } = pretendInput(frames);
    const facts = {
      ...input.facts,
      setAside: { [input.frames[7]?.id ?? ""]: null, [input.frames[8]?.id ?? ""]: "by hand" as const },
    };
    const proposal = await sortFrames({ ...input, facts }, measurePair);
    expect(proposal.frames[7]?.setAside).toBeNull();
    expect(proposal.frames[8]?.setAside).toBe("by hand");
  });

  test("a stack that a person set aside as a whole stays so", async () => {
    const { input, measurePair } = pretendInput(pretendShoot(PLAN));
    const first = input.frames.slice(0, PLAN.framesPerTile);
    const setAside = Object.fromEntries(first.map(({ id }) => [id, "exposure" as const]));
    const proposal = await sortFrames({ ...input, facts: { ...input.facts, setAside } }, measurePair);
    const ids = new Set(first.map(({ id }) => id));
    expect(proposal.frames.filter(({ id }) => ids.has(id)).map((frame) => frame.setAside)).toEqual(
      Array(PLAN.framesPerTile).fill("exposure"),
    );
  });
});

test("2 000 stacks are placed with about four pairs a stack", async () => {
  const { input, measurePair, asked } = pretendInput(
    pretendShoot({ ...PLAN, rows: 40, columns: 50, framesPerTile: 1 }),
  );
  const proposal = await sortFrames(input, measurePair);
  expect([proposal.rows, proposal.columns]).toEqual([40, 50]);
  expect(new Set(proposal.stacks.map(({ row, column }) => `${row} ${column}`)).size).toBe(2000);
  expect(asked()).toBeLessThan(5 * 2000);
});
