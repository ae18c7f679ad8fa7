import { addMember, makePerson, makeProject, type Person, signInAs } from "../support/people";
import { eq } from "drizzle-orm";
import { beforeEach, describe, expect, test } from "vitest";
import { POST } from "@/app/api/projects/[projectId]/commands/route";
import { database, writeTransaction } from "@/db/client";
import { changes, events } from "@/db/schema/board";
import { projects } from "@/db/schema/projects";
import { conflictSchema, GIVEN_BY_HEADER } from "@/lib/board/command-answers";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { ProjectId } from "@/lib/ids";
import { callsOn } from "../support/board-calls";
import { useDatabase } from "../support/database";
import { makeEventfulBoard } from "../support/make-board";
import { storeBoard } from "../support/stored-board";

useDatabase();

let lena: Person;
let jonas: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lena = await makePerson("Lena Lead");
  jonas = await makePerson("Jonas Editor");
  projectId = await makeProject(lena);
  await addMember(projectId, jonas, "editor");
  await storeBoard(projectId, lena, makeEventfulBoard());
  await signInAs(lena);
  calls = callsOn(projectId);
});

const newUuid = () => crypto.randomUUID();

let calls: ReturnType<typeof callsOn>;
const done: typeof calls.done = (command) => calls.done(command);
const refused: typeof calls.refused = (command, status) => calls.refused(command, status);
const board = () => calls.board();

const frame = async (id: string) => (await board()).frames.find((each) => each.id === id);
const stack = async (id: string) => (await board()).stacks.find((each) => each.id === id);
const record = () =>
  database()
    .select({ sentence: changes.sentence, tiles: changes.tiles, userId: changes.userId, revision: changes.revision })
    .from(changes)
    .orderBy(changes.revision);

const MOVE: CommandDraft = {
  type: "move-frames",
  frameIds: ["frame-17"],
  to: { kind: "stack", stackId: "stack-1-4" },
  expect: { "frame-17": "stack-1-3" },
};

describe("a command", () => {
  test("is stored, recorded with who and what, and told to open pages", async () => {
    const answer = await done(MOVE);
    expect(answer.revision).toBe(1);
    expect(await frame("frame-17")).toMatchObject({ stackId: "stack-1-4", placedBy: "person", shift: null });
    expect(await record()).toEqual([
      { sentence: "moved HARB0019 from A3 to A4", tiles: ["A3", "A4"], userId: lena.id, revision: 1 },
    ]);
    const told = await database().select({ type: events.type, payload: events.payload }).from(events);
    expect(told).toContainEqual({ type: "board.changed", payload: { revision: 1 } });
    expect((await board()).revision).toBe(1);
  });

  test("that comes twice is done once and answered the same", async () => {
    const id = newUuid();
    const first = await done({ ...MOVE, id });
    await done({ type: "set-aside", frameIds: ["frame-1"] });
    expect(await done({ ...MOVE, id })).toEqual(first);
    expect(await record()).toHaveLength(2);
  });

  test("that a browser kept is not done in the name of whoever has signed in there since", async () => {
    const send = (givenBy: string) =>
      POST(
        new Request("http://127.0.0.1:3000/commands", {
          method: "POST",
          headers: { "content-type": "application/json", [GIVEN_BY_HEADER]: givenBy },
          body: JSON.stringify({ ...MOVE, id: newUuid(), revision: 0 }),
        }),
        { params: Promise.resolve({ projectId }) },
      );
    await signInAs(jonas);
    expect((await send(lena.id)).status).toBe(401);
    expect(await record()).toEqual([]);
    expect((await send(jonas.id)).status).toBe(200);
  });

  test("may not take the id of another person's, another project's or another command", async () => {
    const id = newUuid();
    await done({ ...MOVE, id });
    expect((await refused({ type: "set-aside", frameIds: ["frame-1"], id }, 400)).detail).toContain("new id");
    await signInAs(jonas);
    expect((await refused({ ...MOVE, id }, 400)).code).toBe("invalid");
    const other = await makeProject(jonas, "Elsewhere");
    const elsewhere = await callsOn(other).send({ type: "add-line", axis: "row", at: 1, id });
    expect(elsewhere.status).toBe(400);
    expect(await elsewhere.text()).not.toContain("HARB");
  });

  test("that finds nothing to do is recorded all the same, so that revisions have no holes", async () => {
    expect((await done({ type: "choose-take", stackId: "stack-1-1" })).changes).toEqual([]);
    expect((await done(MOVE)).revision).toBe(2);
  });

  test("is refused where what it expects is not so, with what is there and who made it so", async () => {
    await signInAs(jonas);
    await done(MOVE);
    await signInAs(lena);
    const body = await refused({
      type: "move-frames",
      frameIds: ["frame-17"],
      to: { kind: "loose" },
      expect: { "frame-17": "stack-1-3" },
    });
    expect(body.code).toBe("conflict");
    expect(body.detail).toBe("HARB0019: It has been moved since. Jonas Editor moved HARB0019 from A3 to A4.");
    const conflict = conflictSchema.parse(body);
    expect(conflict).toMatchObject({ subjectId: "frame-17", revision: 1 });
    expect(conflict.present).toMatchObject({ kind: "frame", frame: { stackId: "stack-1-4" } });
    expect(conflict.lastChange).toMatchObject({ person: "Jonas Editor", sentence: "moved HARB0019 from A3 to A4" });
    expect(await record()).toHaveLength(1);
  });

  test("on frames and stacks of another project finds nothing, and cannot take over a stack's id", async () => {
    const other = await makeProject(jonas, "Elsewhere");
    await signInAs(jonas);
    expect((await callsOn(other).send(MOVE)).status).toBe(409);
    await signInAs(lena);
    const body = await refused({
      type: "move-frames",
      frameIds: ["frame-17"],
      to: { kind: "new-stack", stackId: "stack-1-4", place: null },
    });
    expect(body.detail).toContain("there already");
  });

  test("is checked for its form", async () => {
    expect((await refused({ ...MOVE, id: "no uuid" }, 400)).detail).toMatch(/^id: /);
    const request = new Request(`http://localhost:3000/api/projects/${projectId}/commands`, {
      method: "POST",
      headers: { "content-type": "text/plain" },
      body: JSON.stringify({ ...MOVE, id: newUuid(), revision: 0 }),
    });
    expect((await POST(request, { params: Promise.resolve({ projectId }) })).status).toBe(415);
  });
});

describe("places", () => {
  test("change over, are pushed along and shift with lines, and stay unique at every moment", async () => {
    await done({ type: "place-stack", stackId: "stack-1-1", place: { row: 1, column: 2 }, occupied: "swap" });
    expect([(await stack("stack-1-1"))?.column, (await stack("stack-1-2"))?.column]).toEqual([2, 1]);
    await done({ type: "place-stack", stackId: "stack-3-1", place: { row: 1, column: 1 }, occupied: "push" });
    expect((await stack("stack-1-2"))?.column).toBe(2);
    expect((await stack("stack-1-6"))?.column).toBe(7);
    expect((await board()).grid.columns).toBe(7);
    await done({ type: "add-line", axis: "row", at: 1 });
    expect((await stack("stack-3-1"))?.row).toBe(2);
    expect((await board()).grid.rows).toBe(4);
    await done({ type: "remove-line", axis: "row", at: 1 });
    expect((await stack("stack-3-1"))?.row).toBe(1);
  });

  test("merging takes the emptied stack away, splitting makes one", async () => {
    await done({ type: "merge-stacks", intoStackId: "stack-1-1", stackIds: ["stack-1-2"] });
    expect(await stack("stack-1-2")).toBeUndefined();
    expect((await board()).frames.filter(({ stackId }) => stackId === "stack-1-1")).toHaveLength(12);
    await done({
      type: "split-stack",
      stackId: "stack-1-1",
      atFrameId: "frame-6",
      newStackId: newUuid(),
      place: { row: 1, column: 2 },
    });
    expect((await board()).stacks.find(({ row, column }) => row === 1 && column === 2)).toMatchObject({
      placedBy: "person",
      isChosenTake: true,
    });
  });
});

describe("who merges what", () => {
  test("is the lead's to say, and only to who may edit", async () => {
    await done({ type: "assign", stackIds: ["stack-1-1", "stack-1-2"], userId: jonas.id });
    expect((await record())[0]?.sentence).toBe("gave A1 and A2 to Jonas Editor");
    const viewer = await makePerson("Vera Viewer");
    await addMember(projectId, viewer, "viewer");
    const stranger = await makePerson("Stranger");
    for (const userId of [viewer.id, stranger.id, "nobody"]) {
      expect((await refused({ type: "assign", stackIds: ["stack-1-1"], userId })).detail).toContain("editor");
    }
    await signInAs(jonas);
    expect((await refused({ type: "assign", stackIds: ["stack-1-1"], userId: null }, 403)).code).toBe("forbidden");
    await signInAs(viewer);
    expect((await refused(MOVE, 403)).code).toBe("forbidden");
  });
});

describe("the board that is kept for the next command", () => {
  test("is not trusted once another process has changed the board", async () => {
    await done(MOVE);
    // As the worker does: a revision of its own, recorded with its steps.
    await writeTransaction(async (tx) => {
      await tx.update(projects).set({ revision: 2 }).where(eq(projects.id, projectId));
      await tx.run(`update frames set stack_id = 'stack-1-1' where id = 'frame-17'`);
      await tx.insert(changes).values({
        id: newUuid(),
        projectId,
        revision: 2,
        type: "measure",
        payload: {},
        steps: [{ on: "frame", id: "frame-17", before: { stackId: "stack-1-4" }, after: { stackId: "stack-1-1" } }],
        sentence: "measured",
        atMs: 0,
      });
    });
    await refused({ ...MOVE, to: { kind: "loose" }, expect: { "frame-17": "stack-1-4" } });
    expect((await done({ ...MOVE, to: { kind: "loose" }, expect: { "frame-17": "stack-1-1" } })).revision).toBe(3);
    expect(await frame("frame-17")).toMatchObject({ stackId: null });
  });
});
