import { addMember, makePerson, makeProject, type Person, signInAs } from "../support/people";
import { beforeEach, describe, expect, test } from "vitest";
import type { ProjectId } from "@/lib/ids";
import type { Board } from "@/lib/board/model";
import { accessForJob } from "@/lib/auth/gate";
import { applyChanges } from "@/lib/board/changes";
import { storeMeasured } from "@/lib/board/measure-writes";
import { stackStates } from "@/lib/board/measured";
import { callsOn, type SentCommand } from "../support/board-calls";
import { useDatabase } from "../support/database";
import { makeEventfulBoard } from "../support/make-board";
import { storeBoard } from "../support/stored-board";

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
  await storeBoard(projectId, lena, makeEventfulBoard());
  calls = callsOn(projectId);
  await signInAs(lena);
});

const move = (frameId: string, stackId: string): SentCommand => ({
  type: "move-frames",
  frameIds: [frameId],
  to: { kind: "stack", stackId },
});
const setAside = (frameId: string): SentCommand => ({ type: "set-aside", frameIds: [frameId] });
const undo = (commandId: string): SentCommand => ({ type: "undo", commandId });

/** What is decided on a board, whatever its revision: what must be the same after taking something back. */
function decided(board: Board) {
  const { frames, stacks, questions, grid } = applyChanges(board, []);
  return { frames, stacks, questions: questions.map(({ key }) => key), grid };
}

/** As the worker does after a command. */
async function measure(frameId: string, relativeSharpness: number): Promise<void> {
  const board = await calls.board();
  const id = board.frames.find((frame) => frame.id === frameId)?.stackId ?? "";
  const frames = [{ id: frameId, relativeSharpness, shift: null }];
  const stack = { id, state: stackStates(board).get(id) ?? "", frames, spot: { x: 0.4, y: 0.55 } };
  await storeMeasured(accessForJob({ projectId }), { stacks: [stack], seams: [], questions: [] }, 0);
}

describe("undo", () => {
  test("takes back one's own steps, the newest first, and redo does them again", async () => {
    const start = decided(await calls.board());
    await calls.done(move("frame-17", "stack-1-4"));
    await calls.done(setAside("frame-1"));
    const end = decided(await calls.board());
    expect(await calls.mine()).toMatchObject({ undo: { sentence: "set HARB0003 aside in A1 (by hand)" }, redo: null });
    for (let steps = 0; steps < 2; steps += 1) {
      const { undo: next } = await calls.mine();
      await calls.done(undo(next?.commandId ?? ""));
    }
    expect(decided(await calls.board())).toEqual(start);
    expect(await calls.mine()).toMatchObject({
      undo: null,
      redo: { sentence: "undid: moved HARB0019 from A3 to A4" },
    });
    for (let steps = 0; steps < 2; steps += 1) {
      const { redo: next } = await calls.mine();
      await calls.done(undo(next?.commandId ?? ""));
    }
    expect(decided(await calls.board())).toEqual(end);
    expect(await calls.mine()).toMatchObject({ undo: { sentence: expect.stringMatching(/^redid: /) }, redo: null });
    await calls.done(undo((await calls.mine()).undo?.commandId ?? ""));
    expect((await calls.mine()).redo?.sentence).toBe("undid: set HARB0003 aside in A1 (by hand)");
  });

  test("something new ends what could be done again", async () => {
    const { id } = await calls.done(setAside("frame-1"));
    await calls.done(undo(id));
    expect((await calls.mine()).redo).not.toBeNull();
    await calls.done(setAside("frame-2"));
    expect((await calls.mine()).redo).toBeNull();
  });

  test("a step with nothing to do is passed over", async () => {
    const { id } = await calls.done(setAside("frame-1"));
    await calls.done(setAside("frame-1"));
    expect((await calls.mine()).undo?.commandId).toBe(id);
  });

  test("is refused twice, for somebody else's step, and for one that is not there", async () => {
    const { id } = await calls.done(setAside("frame-1"));
    await calls.done(undo(id));
    expect((await calls.refused(undo(id))).detail).toContain("undone already");
    await signInAs(jonas);
    const body = await calls.refused(undo(id), 403);
    expect(body.detail).toContain("Lena Lead's, not yours");
    expect((await calls.mine()).undo).toBeNull();
    await calls.refused(undo(crypto.randomUUID()), 404);
    const other = callsOn(await makeProject(jonas, "Elsewhere"));
    await other.refused(undo(id), 404);
  });

  test("says whose later step is in the way, and what it was", async () => {
    const { id } = await calls.done(move("frame-17", "stack-1-4"));
    await signInAs(jonas);
    await calls.done(move("frame-17", "stack-2-1"));
    await signInAs(lena);
    const { detail } = await calls.refused(undo(id));
    expect(detail).toMatch(/^Jonas Editor moved HARB0019 from A4 to B1 after this\./);
    expect(detail).toContain("set it right by hand");
  });

  test("leaves what others did elsewhere alone", async () => {
    const { id } = await calls.done(move("frame-17", "stack-1-4"));
    await signInAs(jonas);
    await calls.done(setAside("frame-30"));
    await signInAs(lena);
    await calls.done(undo(id));
    const { frames } = await calls.board();
    expect(frames.find((frame) => frame.id === "frame-17")?.stackId).toBe("stack-1-3");
    expect(frames.find((frame) => frame.id === "frame-30")?.setAside).toBe("by hand");
  });

  test("brings back a stack that was merged away, with its place, and asks its question again", async () => {
    const start = decided(await calls.board());
    const { id } = await calls.done({ type: "merge-stacks", intoStackId: "stack-1-3", stackIds: ["stack-1-4"] });
    await calls.done(undo(id));
    expect(decided(await calls.board())).toEqual(start);
    const answered = await calls.done({
      type: "settle",
      target: { kind: "question", questionId: "question-1", answer: 0 },
    });
    expect((await calls.board()).questions).toHaveLength(2);
    await calls.done(undo(answered.id));
    expect(decided(await calls.board())).toEqual(start);
  });

  test("of who merges what is the lead's alone", async () => {
    await addMember(projectId, await makePerson("Second"), "editor");
    const { id } = await calls.done({ type: "assign", stackIds: ["stack-1-1"], userId: jonas.id });
    await signInAs(jonas);
    await calls.refused({ type: "undo-back-to", toRevision: 0 }, 403);
    await signInAs(lena);
    await calls.done(undo(id));
    expect((await calls.board()).stacks.find((stack) => stack.id === "stack-1-1")?.shareUserId).toBeNull();
  });
});

describe("going back to a step", () => {
  test("takes everything after it back, whoever did it, as one step that can be undone itself", async () => {
    await calls.done(move("frame-17", "stack-1-4"));
    const there = decided(await calls.board());
    await signInAs(jonas);
    await calls.done({ type: "add-line", axis: "column", at: 1 });
    await calls.done({ type: "settle", target: { kind: "question", questionId: "question-3", answer: null } });
    await signInAs(lena);
    const own = await calls.done(setAside("frame-1"));
    const before = decided(await calls.board());
    await signInAs(jonas);
    const back = await calls.done({ type: "undo-back-to", toRevision: 1 });
    expect(decided(await calls.board())).toEqual(there);
    const { entries } = await calls.record();
    expect(entries.map(({ isUndone }) => isUndone)).toEqual([false, true, true, true, false]);
    expect(entries[0]?.sentence).toBe("undid 3 steps, back to “moved HARB0019 from A3 to A4”");
    await signInAs(lena);
    expect((await calls.refused(undo(own.id))).detail).toContain("undone already");
    expect((await calls.mine()).undo?.sentence).toBe("moved HARB0019 from A3 to A4");
    await signInAs(jonas);
    await calls.done(undo(back.id));
    expect(decided(await calls.board())).toEqual(before);
    expect((await calls.record()).entries.map(({ isUndone }) => isUndone)).toEqual([
      false,
      true,
      false,
      false,
      false,
      false,
    ]);
  });

  test("does not mind what was measured in between, nor count it", async () => {
    await calls.done(move("frame-17", "stack-1-4"));
    await measure("frame-17", 0.5);
    const start = (await calls.board()).frames.find(({ id }) => id === "frame-17");
    expect(start?.relativeSharpness).toBe(0.5);
    await calls.refused({ type: "undo-back-to", toRevision: 1 });
    await calls.done(setAside("frame-1"));
    await calls.done({ type: "undo-back-to", toRevision: 0 });
    const { entries } = await calls.record();
    expect(entries.map(({ sentence }) => sentence)).toEqual([
      "undid 2 steps, back to the beginning",
      "set HARB0003 aside in A1 (by hand)",
      "moved HARB0019 from A3 to A4",
    ]);
    expect((await calls.board()).frames.find(({ id }) => id === "frame-17")?.stackId).toBe("stack-1-3");
  });

  test("says so where nothing has been done since", async () => {
    await calls.done(setAside("frame-1"));
    expect((await calls.refused({ type: "undo-back-to", toRevision: 1 })).detail).toContain("Nothing done since");
  });
});

describe("the change record", () => {
  test("is read a page at a time, the newest first, by person and by tile", async () => {
    await calls.done(move("frame-17", "stack-1-4"));
    await signInAs(jonas);
    for (let at = 0; at < 102; at += 1) await calls.done({ type: "add-line", axis: "row", at: 1 });
    const { entries, next, people } = await calls.record();
    expect([entries.length, entries[0]?.revision, next]).toEqual([100, 103, 4]);
    expect(people.map(({ name }) => name)).toEqual(["Jonas Editor", "Lena Lead"]);
    const rest = await calls.record(`?before=${next}`);
    expect(rest.entries.map(({ revision }) => revision)).toEqual([3, 2, 1]);
    expect(rest.next).toBeNull();
    const lenas = await calls.record(`?person=${lena.id}`);
    expect(lenas.entries).toMatchObject([{ person: { name: "Lena Lead" }, tiles: ["A3", "A4"], type: "move-frames" }]);
    expect((await calls.record("?tile=A4")).entries).toHaveLength(1);
    expect((await calls.record("?tile=A5")).entries).toHaveLength(0);
  });
});

describe("what has happened since a revision", () => {
  test("is nothing, or the steps that lead from the board at that revision to the newest", async () => {
    const start = await calls.board();
    expect(await calls.since(0)).toEqual({ unchanged: true, revision: 0 });
    await calls.done(move("frame-17", "stack-1-4"));
    await calls.done({ type: "add-line", axis: "row", at: 2 });
    const since = await calls.since(0);
    if (!("changes" in since)) throw new Error("steps were expected");
    expect(since).toMatchObject({ since: 0, revision: 2 });
    expect(since.told.map(({ person, sentence }) => [person.name.length > 0, sentence])).toEqual([
      [true, "moved HARB0019 from A3 to A4"],
      [true, "added row B"],
    ]);
    const { frames, stacks, grid } = applyChanges(start, since.changes);
    expect({ frames, stacks, grid }).toEqual(
      expect.objectContaining(
        (({ frames, stacks, grid }) => ({ frames, stacks, grid }))(applyChanges(await calls.board(), [])),
      ),
    );
    expect(await calls.since(2)).toEqual({ unchanged: true, revision: 2 });
  });

  test("is the whole board where steps are too many, or for a revision that never was", async () => {
    await calls.done(setAside("frame-1"));
    expect(await calls.since(7)).toMatchObject({ full: true, revision: 1 });
    const frameIds = (await calls.board()).frames.map(({ id }) => id);
    for (let at = 0; at < 3; at += 1) {
      await calls.done({ type: "set-aside", frameIds, reason: "soft" });
      await calls.done({ type: "bring-back", frameIds });
    }
    expect(await calls.since(1)).toMatchObject({ full: true, revision: 7 });
    expect(await calls.since(5)).toMatchObject({ since: 5 });
  });
});
