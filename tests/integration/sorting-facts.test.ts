import { beforeEach, expect, test } from "vitest";
import { eq } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, type Person, signInAs } from "../support/people";
import { callsOn } from "../support/board-calls";
import { bringInShots, planShots, sortNow } from "../support/pretend-project";
import { POST as postSorting } from "@/app/api/projects/[projectId]/sorting/route";
import { database } from "@/db/client";
import { jobs } from "@/db/schema/jobs";
import { projects } from "@/db/schema/projects";
import type { Board } from "@/lib/board/model";
import { changeProject } from "@/lib/projects/writes";
import { accessForJob } from "@/lib/auth/gate";
import type { ProjectId } from "@/lib/ids";

// People's decisions are facts for the next sorting (issue 3), with the real sorting on pictures that it must register.
useDatabase();
const SHOTS = planShots(2, 3);
let lead: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  await signInAs(lead);
});

async function startProject(): Promise<void> {
  projectId = await makeProject(lead);
  await bringInShots(projectId, SHOTS);
  await sortNow();
}

const byId = (board: Board) => new Map(board.stacks.map((stack) => [stack.id, stack]));

/** Frames of each stack, as one text a stack. */
function groupsOf(board: Board): string[] {
  const ids = (stackId: string) => board.frames.filter((frame) => frame.stackId === stackId).map(({ id }) => id);
  return board.stacks.map(({ id }) => ids(id).sort().join(" ")).sort();
}

async function askAnew(): Promise<void> {
  const request = new Request("http://localhost/", { method: "POST" });
  const response = await postSorting(request, { params: Promise.resolve({ projectId }) });
  expect([response.status, await response.text()]).toEqual([202, ""]);
}

test("sorted anew, what people touched stays and the rest is worked out from the frames alone", async () => {
  await startProject();
  const calls = callsOn(projectId);
  const sorted = await calls.board();
  const at = (board: Board, row: number, column: number) => {
    const stack = board.stacks.find((each) => each.row === row && each.column === column);
    if (!stack) throw new Error(`nothing at ${row}, ${column}`);
    return stack;
  };
  const [settled, placed, holder, lender] = [at(sorted, 1, 1), at(sorted, 2, 3), at(sorted, 1, 2), at(sorted, 2, 1)];
  const [lent, loose] = sorted.frames.filter(({ stackId }) => stackId === lender.id);
  const chosen = sorted.frames.find(({ stackId, id }) => stackId === settled.id && id !== settled.referenceId);
  if (!lent || !loose || !chosen) throw new Error("no frames");
  await calls.done({ type: "choose-reference", stackId: settled.id, frameId: chosen.id });
  await calls.done({ type: "settle", target: { kind: "stack", stackId: settled.id, isSettled: true } });
  await calls.done({ type: "place-stack", stackId: placed.id, place: { row: 5, column: 3 } });
  await calls.done({ type: "move-frames", frameIds: [lent.id], to: { kind: "stack", stackId: holder.id } });
  await calls.done({ type: "move-frames", frameIds: [loose.id], to: { kind: "loose" } });
  await calls.done({ type: "assign", stackIds: [at(sorted, 2, 2).id], userId: lead.id });
  // A limit that cuts every stack into single frames is a setting that the sorting follows: it is sorted anew.
  await changeProject(accessForJob({ projectId }), { longestPauseSeconds: 0.5 });
  await sortNow();
  const cut = await calls.board();
  expect(cut.stacks.length).toBeGreaterThan(sorted.stacks.length + 5);
  const kept = new Set([settled.id, placed.id, holder.id]);
  for (const id of kept) {
    const [was, is] = [sorted, cut].map((board) =>
      board.frames.filter(({ stackId }) => stackId === id).map((f) => f.id),
    );
    expect(is?.sort()).toEqual([...(was ?? []), ...(id === holder.id ? [lent.id] : [])].sort());
  }
  await changeProject(accessForJob({ projectId }), { longestPauseSeconds: null });
  await sortNow();
  const mended = await calls.board();
  const shared = mended.stacks.filter(({ shareUserId }) => shareUserId === lead.id);
  expect(shared.map(({ row, column }) => [row, column])).toEqual([[2, 2]]);
  expect(byId(mended).get(settled.id)).toMatchObject({ row: 1, column: 1, isSettled: true, referenceId: chosen.id });
  expect(byId(mended).get(placed.id)).toMatchObject({ row: 5, column: 3, placedBy: "person" });
  expect(mended.frames.find(({ id }) => id === lent.id)).toMatchObject({ stackId: holder.id, placedBy: "person" });
  expect(mended.frames.find(({ id }) => id === loose.id)).toMatchObject({ stackId: null, placedBy: "person" });
  // The rest as the pictures have it again: as at first, without the two that were taken out.
  const taken = new Set([lent.id, loose.id]);
  const withoutTaken = (board: Board) =>
    groupsOf({ ...board, frames: board.frames.filter(({ id }) => !taken.has(id)) });
  expect(withoutTaken(mended)).toEqual(withoutTaken(sorted));
  // And by the button, once more: nothing changes, and all is in the record.
  await askAnew();
  await askAnew();
  await sortNow();
  const again = await calls.board();
  expect(groupsOf(again)).toEqual(groupsOf(mended));
  const { entries } = await calls.record();
  expect(entries.slice(0, 2).map(({ type, person, sentence }) => [type, person?.name ?? null, sentence])).toEqual([
    ["sort", null, expect.stringMatching(/^sorted again: .*; what people decided stayed$/)],
    ["sort-anew", "Lena Lead", "had the frames sorted again; what people decided stays"],
  ]);
  expect(entries.filter(({ type }) => type === "sort-anew")).toHaveLength(3);
});

test("asked for while a sorting runs, it is sorted once more; the wish is not lost", async () => {
  await startProject();
  await askAnew();
  const [job] = await database().select({ state: jobs.state }).from(jobs).where(eq(jobs.kind, "sort-project"));
  expect(job?.state).toBe("waiting");
  const wanted = async () => (await database().select({ is: projects.isAnewWanted }).from(projects))[0]?.is;
  expect(await wanted()).toBe(true);
  await sortNow();
  expect(await wanted()).toBe(false);
});
