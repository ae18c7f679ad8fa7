import * as fc from "fast-check";
import { expect, test } from "vitest";
import { applyChanges, ChangeConflict } from "@/lib/board/changes";
import { boardCommandSchema, type PlannedCommand } from "@/lib/board/command-schema";
import { boardFromProposal } from "@/lib/board/from-proposal";
import type { Board, BoardStack } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { sortingFacts } from "@/lib/board/sorting-facts";
import { sortFrames } from "@/lib/sorting/sort-frames";
import { pretendInput, pretendShoot, toSortFrame } from "@/tests/support/accuracy/pretend-shoot";

// "People's decisions (placed, set aside, settled) are facts for the next sorting, which only fills in and never moves
// them" (issue 3): random commands on a sorted board, then the real sorting with frames that came in since.
const ORDER = { along: "rows", from: "top-left", turns: true } as const;
/** Steps of whole pixels. */
const SHOTS = pretendShoot({ rows: 3, columns: 3, framesPerTile: 4, order: ORDER, overlap: 0.375 });
const ALL = pretendInput(SHOTS);
const FRAMES = SHOTS.map(toSortFrame);
const FILES = [{ id: "f", name: "a.jpg", folder: null, bytes: 1, sha256: "0", mediaType: "image/jpeg" }];

interface Decided {
  readonly board: Board;
  /** Keys of questions, and references by stack, that somebody decided. */
  readonly settled: ReadonlySet<string>;
  readonly references: ReadonlyMap<string, string>;
}

const isPlaced = (stack: BoardStack) => stack.row !== null && (stack.placedBy === "person" || stack.isSettled);
const placeOf = (stack: BoardStack) => `${stack.row} ${stack.column} ${stack.take}`;

async function sort(present: readonly number[], decided: Decided | null, isAnew = false): Promise<Board> {
  const frames = present.flatMap((at) => FRAMES[at] ?? []);
  const facts = decided
    ? sortingFacts(
        {
          ...decided.board,
          settledQuestionKeys: [...decided.settled],
          choices: { references: decided.references, takes: new Set<string>() },
        },
        isAnew,
      )
    : ALL.input.facts;
  const proposal = await sortFrames({ ...ALL.input, frames, facts }, ALL.measurePair);
  const source = {
    projectId: "p",
    projectName: "Harbour",
    revision: 1,
    options: ALL.input.options,
    frames: frames.map((frame) => ({ ...frame, files: FILES })),
    unreadable: [],
    duplicates: [],
  };
  return boardFromProposal(source, proposal);
}

/** A command chosen by numbers from what is on the board now; many are refused, which is no matter. */
function commandOf(board: Board, [kind = 0, one = 0, two = 0, three = 0]: readonly number[]): object {
  const stack = board.stacks[one % board.stacks.length];
  const frame = board.frames[two % board.frames.length];
  const own = board.frames.filter(({ stackId }) => stackId === stack?.id);
  const place = { row: 1 + (two % 4), column: 1 + (three % 4) };
  const frameIds = [frame?.id];
  const stackId = stack?.id;
  const question = board.questions[one % Math.max(1, board.questions.length)];
  const commands = [
    { type: "move-frames", frameIds, to: { kind: "stack", stackId } },
    { type: "move-frames", frameIds, to: { kind: "loose" } },
    { type: "move-frames", frameIds, to: { kind: "new-stack", stackId: `new-${two}-${three}`, place: null } },
    { type: "split-stack", stackId, atFrameId: own[1]?.id ?? "none", newStackId: `split-${two}`, place },
    { type: "place-stack", stackId, place, occupied: ["swap", "push", "take"][two % 3] },
    { type: "place-stack", stackId, place: null },
    { type: "set-aside", frameIds },
    { type: "bring-back", frameIds },
    { type: "choose-reference", stackId, frameId: own[two % Math.max(1, own.length)]?.id ?? "none" },
    { type: "choose-take", stackId },
    { type: "add-line", axis: one % 2 === 0 ? "row" : "column", at: 1 + (two % 4) },
    { type: "settle", target: { kind: "stack", stackId, isSettled: true } },
    { type: "settle", target: { kind: "question", questionId: question?.id ?? "none", answer: null } },
  ];
  return commands[kind % commands.length] ?? {};
}

function decide(start: Board, orders: readonly (readonly number[])[]): Decided {
  let board = start;
  const settled = new Set<string>();
  const chosen = new Map<string, string>();
  for (const order of orders) {
    const fields = { id: crypto.randomUUID(), revision: 1, ...commandOf(board, order) };
    const parsed = boardCommandSchema.safeParse(fields);
    if (!parsed.success) continue;
    const command = parsed.data as PlannedCommand;
    try {
      const after = applyChanges(board, planCommand(board, command));
      const open = new Set(after.questions.map(({ id }) => id));
      for (const { id, key } of board.questions) if (!open.has(id)) settled.add(key);
      if (command.type === "choose-reference") chosen.set(command.stackId, command.frameId);
      board = after;
    } catch (error) {
      if (!(error instanceof ChangeConflict)) throw error;
    }
  }
  const referenceOf = new Map(board.stacks.map((stack) => [stack.id, stack.referenceId]));
  return { board, settled, references: new Map([...chosen].filter(([id, frame]) => referenceOf.get(id) === frame)) };
}

/** What people decided, whichever way the next sorting goes. */
function expectDecisionsKept({ board, settled, references }: Decided, after: Board): void {
  const stacks = new Map(after.stacks.map((stack) => [stack.id, stack]));
  const frames = new Map(after.frames.map((frame) => [frame.id, frame]));
  for (const stack of board.stacks) {
    if (isPlaced(stack))
      expect(stacks.get(stack.id)).toMatchObject({ row: stack.row, column: stack.column, take: stack.take });
    else if (stack.placedBy === "person") expect(stacks.get(stack.id)?.row).toBeNull();
  }
  for (const [stackId, frameId] of references) expect(stacks.get(stackId)?.referenceId).toBe(frameId);
  for (const { id, name, stackId, setAside, placedBy } of board.frames) {
    if (placedBy !== "person") continue;
    expect([frames.get(id)?.stackId, frames.get(id)?.setAside], name).toEqual([stackId, setAside]);
  }
  for (const { key } of after.questions) expect(settled.has(key)).toBe(false);
  const places = after.stacks.filter(({ row }) => row !== null).map(placeOf);
  expect(new Set(places).size, "one stack a place and take").toBe(places.length);
  expect(new Set(after.frames.map(({ id }) => id)).size).toBe(after.frames.length);
}

/** Nobody's stack moved: all places as they were, or all alike by lines found before the first. */
function expectNothingMoved({ board }: Decided, after: Board): void {
  const stacks = new Map(after.stacks.map((stack) => [stack.id, stack]));
  const frames = new Map(after.frames.map((frame) => [frame.id, frame]));
  const first = board.stacks.find(({ row }) => row !== null);
  const is = stacks.get(first?.id ?? "");
  const [down, across] = [(is?.row ?? 0) - (first?.row ?? 0), (is?.column ?? 0) - (first?.column ?? 0)];
  expect(Math.min(down, across)).toBeGreaterThanOrEqual(0);
  if (board.stacks.some(isPlaced)) expect([down, across]).toEqual([0, 0]);
  for (const stack of board.stacks) {
    const kept = stacks.get(stack.id);
    if (stack.row === null || stack.column === null) continue;
    const { take, isChosenTake } = stack;
    expect(kept).toMatchObject({ row: stack.row + down, column: stack.column + across, take, isChosenTake });
  }
  for (const { id, name, stackId } of board.frames) {
    if (stackId !== null) expect(frames.get(id)?.stackId, name).toBe(stackId);
  }
  expect(after.grid.rows).toBeGreaterThanOrEqual(board.grid.rows + down);
  expect(after.grid.columns).toBeGreaterThanOrEqual(board.grid.columns + across);
}

const orders = fc.array(fc.tuple(fc.nat(97), fc.nat(97), fc.nat(97), fc.nat(97)), { minLength: 1, maxLength: 12 });
/** Which frames come in late: any. */
const late = fc.uniqueArray(fc.nat(SHOTS.length - 1), { minLength: 1, maxLength: 16 });
const everything = SHOTS.map((_, at) => at);

test("more frames come in: decisions hold, and nobody's stack moves", async () => {
  await fc.assert(
    fc.asyncProperty(orders, late, async (numbers, missing) => {
      const early = everything.filter((at) => !missing.includes(at));
      const decided = decide(await sort(early, null), numbers);
      const after = await sort(everything, decided);
      expect(after.frames).toHaveLength(SHOTS.length);
      expectDecisionsKept(decided, after);
      expectNothingMoved(decided, after);
    }),
    { numRuns: 60 },
  );
}, 60_000);

test("sorted anew: decisions hold", async () => {
  await fc.assert(
    fc.asyncProperty(orders, async (numbers) => {
      const decided = decide(await sort(everything, null), numbers);
      expectDecisionsKept(decided, await sort(everything, decided, true));
    }),
    { numRuns: 60 },
  );
}, 60_000);

test("sorted anew where nobody decided anything: as at first", async () => {
  const board = await sort(everything, null);
  const none = { board, settled: new Set<string>(), references: new Map<string, string>() };
  expect(await sort(everything, none, true)).toEqual(board);
});
