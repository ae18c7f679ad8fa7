import { utimesSync } from "node:fs";
import path from "node:path";
import { beforeEach, expect, test } from "vitest";
import { eq } from "drizzle-orm";
import { pictureResult } from "../support/analysis-results";
import { callsOn } from "../support/board-calls";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, type Person, signInAs } from "../support/people";
import { createUpload, idOf, uploadFile } from "../support/uploads";
import { database, writeTransaction } from "@/db/client";
import { changes, questions } from "@/db/schema/board";
import { stacks } from "@/db/schema/frames";
import { accessForJob } from "@/lib/auth/gate";
import { getBoard } from "@/lib/board/reads";
import { findSortError, getProgress, listIntakeFiles } from "@/lib/frames/reads";
import { recordAnalysis } from "@/lib/frames/writes";
import type { ProjectId } from "@/lib/ids";
import { createSortProjectHandler } from "@/lib/jobs/handlers/sort-project";
import { claimJob, finishJob } from "@/lib/jobs/queue";
import type { Proposal, ProposedStack, SortFrames, SortInput } from "@/lib/sorting/types";

// How a proposal gets onto the board. The sorting itself is a pretended one: all frames in as many stacks as asked for.
const storageDir = useDatabase();
let lead: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead);
  await signInAs(lead);
});

const access = () => accessForJob({ projectId });

async function bringIn(...names: string[]): Promise<void> {
  for (const name of names) await uploadFile(projectId, name, Buffer.from(name));
  for (const file of await listIntakeFiles(access())) {
    await recordAnalysis(access(), file.id, pictureResult(file.name), Date.now());
  }
}

async function run(sortFrames: SortFrames) {
  const job = await claimJob("sort-project", Date.now() + 60_000);
  if (!job) throw new Error("no sorting was asked for");
  const handler = createSortProjectHandler(sortFrames);
  const outcome = await handler.run(job, new AbortController().signal).catch((error: Error) => error);
  if ("type" in outcome && outcome.type === "done") await finishJob(job, Date.now());
  return { outcome, handler, job };
}

/** One stack a frame, side by side; `turned` puts them the other way round. */
function inARow(input: SortInput, { turned = false, question = true } = {}): Proposal {
  const ids = input.frames.map(({ id }) => id);
  const place = (at: number) => (turned ? ids.length - at : at + 1);
  return {
    engineVersion: "pretended",
    rows: 1,
    columns: ids.length,
    shotOrder: null,
    stacks: ids.map((id, at): ProposedStack => ({
      id: `stack-${id}`,
      frameIds: [id],
      row: 1,
      column: place(at),
      take: 1,
      isChosenTake: true,
      referenceId: id,
      confidence: 0.9,
      reason: "pretended",
      position: { xPx: at * 400, yPx: 0 },
      spot: { x: 0.5, y: 0.5 },
    })),
    frames: ids.map((id, at) => ({
      id,
      orderTaken: at,
      stackId: `stack-${id}`,
      setAside: null,
      relativeSharpness: 1,
      shift: { xPx: 0, yPx: 0 },
      pauseBeforeSeconds: null,
      confidence: 0.9,
      reason: "pretended",
    })),
    seams: ids.slice(1).map((id, at) => ({
      stackId: `stack-${ids[at]}`,
      neighbourId: `stack-${id}`,
      side: "right",
      overlap: 0.3,
    })),
    questions: question
      ? [
          {
            key: "few:A1",
            kind: "few-frames",
            message: "Is one frame enough for A1?",
            evidence: "One frame.",
            frameIds: ids.slice(0, 1),
            stackIds: [],
            tile: "A1",
            answers: [{ label: "Keep it", action: { type: "keep" } }],
            severity: 1,
          },
        ]
      : [],
    longestPauseSeconds: 7,
  };
}

const plain: SortFrames = async (input) => inARow(input);

test("a proposal is one revision and one change by the computation, and covers everything", async () => {
  await bringIn("a.jpg", "b.jpg", "c.jpg");
  expect((await getProgress(access())).sorted).toBe(false);
  expect((await run(plain)).outcome).toEqual({ type: "done" });
  expect((await getProgress(access())).sorted).toBe(true);
  const board = await getBoard(access());
  expect([board.revision, board.grid.columns, board.stacks.length, board.frames.length]).toEqual([1, 3, 3, 3]);
  expect(board.seams).toHaveLength(2);
  expect(board.questions.map(({ message }) => message)).toEqual(["Is one frame enough for A1?"]);
  const recorded = await database().select({ userId: changes.userId, type: changes.type }).from(changes);
  expect(recorded).toEqual([{ userId: null, type: "sort" }]);
});

test("a later proposal may exchange all places, and keeps shares, marks and the ids of questions", async () => {
  await bringIn("a.jpg", "b.jpg");
  await run(plain);
  const before = await getBoard(access());
  await writeTransaction((tx) => tx.update(stacks).set({ isSettled: true, shareUserId: lead.id }));
  await bringIn("c.jpg");
  let facts: SortInput["facts"] | undefined;
  await run(async (input) => {
    facts = input.facts;
    return inARow(input, { turned: true });
  });
  expect(facts?.stacks.map(({ column, byPerson }) => [column, byPerson])).toEqual([
    [1, true],
    [2, true],
  ]);
  const after = await getBoard(access());
  expect(after.stacks.map(({ column, isSettled, shareUserId }) => [column, isSettled, shareUserId])).toEqual([
    [1, false, null],
    [2, true, lead.id],
    [3, true, lead.id],
  ]);
  expect(after.questions[0]?.id).toBe(before.questions[0]?.id);
});

test("a sorting is recorded with its steps, and a person can go back to before it", async () => {
  await bringIn("a.jpg", "b.jpg");
  await run(plain);
  const calls = callsOn(projectId);
  const before = await calls.board();
  await bringIn("c.jpg");
  await run(async (input) => inARow(input, { turned: true, question: false }));
  const sorted = await calls.board();
  expect((await calls.record()).entries.map(({ person, sentence, tiles }) => [person, sentence, tiles])).toEqual([
    // b.jpg stays at A2.
    [null, "sorted 3 frames into 3 stacks", ["A1", "A3"]],
    [null, "sorted 2 frames into 2 stacks", ["A1", "A2"]],
  ]);
  expect(await calls.since(1)).toMatchObject({ full: true });
  const back = await calls.done({ type: "undo-back-to", toRevision: 1 });
  const after = await calls.board();
  const placesOf = ({ stacks: all }: typeof after) => all.map(({ id, row, column }) => [id, row, column]).sort();
  expect(placesOf(after)).toEqual(placesOf(before));
  expect(after.grid.columns).toBe(2);
  expect(after.questions.map(({ message }) => message)).toEqual(before.questions.map(({ message }) => message));
  // What came in with the sorting that was taken back is loose.
  expect(after.frames.map(({ name, stackId }) => [name, stackId !== null]).sort()).toEqual([
    ["a", true],
    ["b", true],
    ["c", false],
  ]);
  await calls.done({ type: "undo", commandId: back.id });
  expect(placesOf(await calls.board())).toEqual(placesOf(sorted));
  // A question that went with its sorting may be asked again by the next: nobody has answered it.
  await calls.done({ type: "undo-back-to", toRevision: 0 });
  expect((await calls.board()).stacks).toEqual([]);
  expect(await database().select({ id: questions.id }).from(questions)).toEqual([]);
});

test("what is settled is not asked again, and a doubt that is gone is no longer asked", async () => {
  await bringIn("a.jpg");
  await run(plain);
  await writeTransaction((tx) => tx.update(questions).set({ settledAtMs: 1, settledBy: lead.id }));
  await bringIn("b.jpg");
  let settled: readonly string[] = [];
  await run(async (input) => {
    settled = input.facts.settledQuestionKeys;
    return inARow(input);
  });
  expect(settled).toEqual(["few:A1"]);
  expect((await getBoard(access())).questions).toEqual([]);
  await writeTransaction((tx) => tx.update(questions).set({ settledAtMs: null }).where(eq(questions.key, "few:A1")));
  await bringIn("c.jpg");
  await run(async (input) => inARow(input, { question: false }));
  expect(await database().select({ id: questions.id }).from(questions)).toEqual([]);
});

test("what comes in while it sorts makes it sort again, with what it measured; nothing half is stored", async () => {
  await bringIn("a.jpg");
  const seen: number[] = [];
  const revisions: number[] = [];
  const { outcome } = await run(async (input) => {
    seen.push(input.frames.length);
    revisions.push((await getBoard(access())).revision);
    if (seen.length < 3) await bringIn(`${seen.length}.jpg`);
    return inARow(input);
  });
  expect(outcome).toEqual({ type: "done" });
  expect([seen, revisions]).toEqual([
    [1, 2, 3],
    [0, 0, 0],
  ]);
  const board = await getBoard(access());
  expect([board.revision, board.frames.length]).toEqual([1, 3]);
  expect((await getProgress(access())).sorted).toBe(true);
});

test("a sorting that fails says so in plain words, and the next that works takes the words back", async () => {
  await bringIn("a.jpg");
  const failing: SortFrames = async () => {
    throw new RangeError("matrix is singular");
  };
  const { outcome, handler, job } = await run(failing);
  expect(outcome).toBeInstanceOf(RangeError);
  expect(await findSortError(access())).toMatch(/could not be sorted; it is tried again/);
  await handler.giveUp(job, outcome);
  expect(await findSortError(access())).toMatch(/Tell the administrator/);
  await bringIn("b.jpg");
  // Past the lease of the failed try.
  const again = await claimJob("sort-project", Date.now() + 120_000);
  if (!again) throw new Error("no new try");
  await createSortProjectHandler(plain).run(again, new AbortController().signal);
  expect(await findSortError(access())).toBeNull();
});

test("it waits for an upload that moves, not for one that is stalled", async () => {
  await bringIn("a.jpg");
  const created = await createUpload({ projectId, filename: "b.jpg" }, 100);
  const original = path.join(storageDir, "originals", idOf(created.headers.get("location") ?? ""));
  const { outcome, handler, job } = await run(plain);
  expect(outcome).toMatchObject({ type: "later" });
  const longAgo = Date.now() / 1000 - 11;
  utimesSync(original, longAgo, longAgo);
  expect(await handler.run(job, new AbortController().signal)).toEqual({ type: "done" });
  expect((await getProgress(access())).sorted).toBe(true);
});

test("files that are all unreadable end sorted, with an empty board", async () => {
  await uploadFile(projectId, "a.jpg", Buffer.from("text"));
  const [file] = await listIntakeFiles(access());
  if (!file) throw new Error("no file");
  await recordAnalysis(access(), file.id, { type: "unreadable", sha256: null, reason: "No picture." }, Date.now());
  const { sortFrames } = await import("@/lib/sorting/sort-frames");
  expect((await run(sortFrames)).outcome).toEqual({ type: "done" });
  expect(await getProgress(access())).toEqual({ received: 1, analysed: 0, failed: 1, total: 1, sorted: true });
  const board = await getBoard(access());
  expect([board.frames, board.unreadable.length]).toEqual([[], 1]);
});
