import { addMember, makePerson, makeProject, type Person, signInAs } from "../support/people";
import { beforeEach, expect, test } from "vitest";
import { eq } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { members } from "@/db/schema/projects";
import type { ProjectId } from "@/lib/ids";
import { callsOn, type SentCommand } from "../support/board-calls";
import { useDatabase } from "../support/database";
import { makeBoard } from "../support/make-board";
import { storeBoard } from "../support/stored-board";

// Issue 3 and common practice: a slip of the hand or a hostile client must not make a board that nobody can look at.

useDatabase();

let lena: Person;
let jonas: Person;
let projectId: ProjectId;
let calls: ReturnType<typeof callsOn>;

beforeEach(async () => {
  lena = await makePerson("Lena Lead");
  jonas = await makePerson("Jonas Editor");
  projectId = await makeProject(lena);
  await addMember(projectId, jonas, "editor");
  await storeBoard(projectId, lena, makeBoard({ rows: 3, columns: 4, framesPerTile: 5 }));
  calls = callsOn(projectId);
  await signInAs(lena);
});

const placeAt = (row: number, column: number): SentCommand => ({
  type: "place-stack",
  stackId: "stack-1-1",
  place: { row, column },
  occupied: "refuse",
});

test("a place lies at most three lines beyond the grid, and the refusal names nobody", async () => {
  await calls.done({ type: "add-line", axis: "row", at: 1 });
  const { detail } = await calls.refused(placeAt(8, 1));
  expect(detail).toBe(
    "The grid has 4 rows. A place may lie at most 3 rows beyond it. Add rows first, or choose a nearer place.",
  );
  const to = { kind: "new-stack", stackId: "far", place: { row: 1, column: 1000 } } as const;
  await calls.refused({ type: "move-frames", frameIds: ["frame-1"], to });
  await calls.refused({
    type: "split-stack",
    stackId: "stack-1-1",
    atFrameId: "frame-2",
    newStackId: "far",
    place: { row: 1000, column: 1 },
  });
  await calls.done(placeAt(7, 7));
  expect((await calls.board()).grid).toMatchObject({ rows: 7, columns: 7 });
});

test("a conflict about what never was names nobody's step", async () => {
  await calls.done({ type: "add-line", axis: "row", at: 1 });
  const { detail } = await calls.refused({ type: "choose-take", stackId: "never-there" });
  expect(detail).toBe("This stack is no longer there.");
});

test("what is named twice is named once, and ids in capitals are the same ids", async () => {
  const id = crypto.randomUUID();
  const frames = ["frame-1", "frame-1"];
  const first = await calls.done({ id, type: "set-aside", frameIds: frames });
  expect(first.changes.filter(({ on }) => on === "frame")).toHaveLength(1);
  const again = await calls.done({ id: id.toUpperCase(), type: "set-aside", frameIds: frames });
  expect(again).toEqual(first);
});

test("however much is wrong, the answer stays short", async () => {
  const expectation = Object.fromEntries(Array.from({ length: 20_000 }, (_, at) => [`bad key ${at}`, null]));
  const response = await calls.send({ type: "set-aside", frameIds: ["frame-1"], expect: expectation });
  expect(response.status).toBe(400);
  expect((await response.text()).length).toBeLessThan(20_000);
});

test("going back to before a step gives to nobody what its holder may not edit any more", async () => {
  await calls.done({ type: "assign", stackIds: ["stack-1-1"], userId: jonas.id });
  await calls.done({ type: "merge-stacks", intoStackId: "stack-1-2", stackIds: ["stack-1-1"] });
  await writeTransaction((tx) => tx.update(members).set({ role: "viewer" }).where(eq(members.userId, jonas.id)));
  await calls.done({ type: "undo-back-to", toRevision: 1 });
  const back = (await calls.board()).stacks.find(({ id }) => id === "stack-1-1");
  expect(back).toMatchObject({ row: 1, column: 1, shareUserId: null });
});
