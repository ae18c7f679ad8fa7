import { addMember, makePerson, makeProject, type Person, signInAs } from "../support/people";
import { beforeEach, describe, expect, test } from "vitest";
import type { Board } from "@/lib/board/model";
import { callsOn, type SentCommand } from "../support/board-calls";
import { useDatabase } from "../support/database";
import { makeBoard } from "../support/make-board";
import { storeBoard } from "../support/stored-board";

// Issue 3: an undo whose way a later command of somebody else is in says whose and what (409); where it is done, the
// board is one that commands could have made. product.md: a reference is "the sharpest in use unless someone chooses",
// "one take of a tile is the chosen one", rows and columns hold every stack, a place without a stack is a hole.

useDatabase();

let lena: Person;
let jonas: Person;
let calls: ReturnType<typeof callsOn>;

beforeEach(async () => {
  lena = await makePerson("Lena Lead");
  jonas = await makePerson("Jonas Editor");
  const projectId = await makeProject(lena);
  await addMember(projectId, jonas, "editor");
  await storeBoard(projectId, lena, makeBoard({ rows: 3, columns: 4, framesPerTile: 5, holes: ["3,1"] }));
  calls = callsOn(projectId);
});

const move = (frameIds: string[], stackId: string): SentCommand => ({
  type: "move-frames",
  frameIds,
  to: { kind: "stack", stackId },
});

/** What no board may be, in words. */
function faultsOf({ stacks, frames, grid }: Board): string[] {
  return stacks.flatMap((stack) => {
    const own = frames.filter(({ stackId }) => stackId === stack.id);
    const at = stacks.filter(({ row, column }) => row !== null && row === stack.row && column === stack.column);
    const reference = own.find(({ id }) => id === stack.referenceId);
    return [
      ...(own.length === 0 ? [`${stack.id} has no frames`] : []),
      ...(stack.referenceId !== null && !reference ? [`${stack.id}: its reference is elsewhere`] : []),
      ...(reference && reference.setAside !== null ? [`${stack.id}: its reference is set aside`] : []),
      ...(stack.row !== null && at.filter(({ isChosenTake }) => isChosenTake).length !== 1
        ? [`${stack.id}: not one take of its tile is chosen`]
        : []),
      ...((stack.row ?? 0) > grid.rows || (stack.column ?? 0) > grid.columns
        ? [`${stack.id} is outside the grid`]
        : []),
    ];
  });
}

/** Jonas does something, Lena something after it, and Jonas takes his back. */
async function undoAround(his: SentCommand, hers: SentCommand): Promise<void> {
  await signInAs(jonas);
  const { id } = await calls.done(his);
  await signInAs(lena);
  await calls.done(hers);
  await signInAs(jonas);
  const response = await calls.send({ type: "undo", commandId: id });
  expect([200, 409], await response.clone().text()).toContain(response.status);
  expect(faultsOf(await calls.board())).toEqual([]);
}

const FRAMES_OF_A1 = ["frame-0", "frame-1", "frame-2", "frame-3", "frame-4"];
/** `makeBoard` chooses the third frame of each stack. */
const REFERENCE_OF_A1 = "frame-2";
const chooseFourth: SentCommand = { type: "choose-reference", stackId: "stack-1-1", frameId: "frame-4" };

describe("an undo with somebody's step in between", () => {
  test("does not fail where the stack that a frame came from is gone", async () => {
    await undoAround(move(["frame-1"], "stack-1-2"), {
      type: "merge-stacks",
      intoStackId: "stack-1-3",
      stackIds: ["stack-1-1"],
    });
  });

  test("does not make a frame the reference that has gone to another stack", async () => {
    await undoAround(chooseFourth, move([REFERENCE_OF_A1], "stack-1-2"));
  });

  test("does not make a frame the reference that is set aside", async () => {
    await undoAround(chooseFourth, { type: "set-aside", frameIds: [REFERENCE_OF_A1] });
  });

  test("does not leave a stack without frames", async () => {
    await undoAround(move(["frame-5"], "stack-1-1"), move(FRAMES_OF_A1, "stack-1-3"));
  });

  test("does not leave a stack outside the grid", async () => {
    await undoAround(
      { type: "place-stack", stackId: "stack-1-1", place: { row: 4, column: 1 }, occupied: "refuse" },
      { type: "place-stack", stackId: "stack-1-2", place: { row: 4, column: 2 }, occupied: "refuse" },
    );
  });

  test("does not leave a tile without a chosen take", async () => {
    await signInAs(lena);
    const toA2: SentCommand = {
      type: "place-stack",
      stackId: "stack-1-1",
      place: { row: 1, column: 2 },
      occupied: "take",
    };
    await calls.done(toA2);
    await undoAround(
      { type: "merge-stacks", intoStackId: "stack-1-3", stackIds: ["stack-1-2"] },
      { type: "place-stack", stackId: "stack-1-1", place: { row: 1, column: 1 }, occupied: "refuse" },
    );
  });
});

test("a stack that had no frame in use has a reference once it gets some", async () => {
  await signInAs(jonas);
  await calls.done({ type: "set-aside", frameIds: FRAMES_OF_A1 });
  await calls.done({ type: "merge-stacks", intoStackId: "stack-1-1", stackIds: ["stack-1-2"] });
  expect((await calls.board()).stacks.find(({ id }) => id === "stack-1-1")?.referenceId).not.toBeNull();
});

describe("what is taken back and done again", () => {
  const make: SentCommand = {
    type: "move-frames",
    frameIds: ["frame-0"],
    to: { kind: "new-stack", stackId: "made", place: { row: 3, column: 1 } },
  };
  const addColumn: SentCommand = { type: "add-line", axis: "column", at: 1 };

  /** Jonas makes a stack, Lena adds a column before it, Jonas takes his stack back. @returns the id of his undo */
  async function undoAcrossColumn(): Promise<string> {
    await signInAs(jonas);
    const { id } = await calls.done(make);
    await signInAs(lena);
    await calls.done(addColumn);
    await signInAs(jonas);
    return (await calls.done({ type: "undo", commandId: id })).id;
  }

  test("comes back where it was when it went, not where it was made", async () => {
    const undone = await undoAcrossColumn();
    await calls.done({ type: "undo", commandId: undone });
    expect((await calls.board()).stacks.find(({ id }) => id === "made")).toMatchObject({ row: 3, column: 2 });
  });

  test("does not bar the way back to before it", async () => {
    await undoAcrossColumn();
    await signInAs(lena);
    await calls.done({ type: "undo-back-to", toRevision: 0 });
  });

  test("keeps whom the lead gave the stack to", async () => {
    await signInAs(jonas);
    const { id } = await calls.done(make);
    await signInAs(lena);
    await calls.done({ type: "assign", stackIds: ["made"], userId: jonas.id });
    await signInAs(jonas);
    const undone = await calls.send({ type: "undo", commandId: id });
    // Either it says that Lena's step is in the way, or doing it again loses nothing of hers.
    if (undone.status === 409) return;
    const answer = (await undone.json()) as { readonly id: string };
    await calls.done({ type: "undo", commandId: answer.id });
    expect((await calls.board()).stacks.find(({ id: stack }) => stack === "made")?.shareUserId).toBe(jonas.id);
  });
});
