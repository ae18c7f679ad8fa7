import { beforeEach, expect, test } from "vitest";
import { asc, eq } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { addMember, makePerson, makeProject, type Person, signInAs } from "../support/people";
import { GET, POST } from "@/app/api/projects/[projectId]/presence/route";
import { database, writeTransaction } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import { events, presences } from "@/db/schema/board";
import { members } from "@/db/schema/projects";
import { removeSession } from "@/lib/auth/sessions";
import { presenceSchema } from "@/lib/board/command-answers";
import type { ProjectId } from "@/lib/ids";
import { prunePresences } from "@/lib/presence/writes";

useDatabase();
let lead: Person;
let viewer: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  viewer = await makePerson("Vera Viewer");
  projectId = await makeProject(lead);
  await addMember(projectId, viewer, "viewer");
});

const context = () => ({ params: Promise.resolve({ projectId }) });
const url = "http://localhost/";

async function post(tile: unknown) {
  const headers = { "content-type": "application/json" };
  const response = await POST(new Request(url, { method: "POST", headers, body: JSON.stringify({ tile }) }), context());
  if (response.status !== 200) return response.status;
  return told(presenceSchema.parse(await response.json()));
}

async function look() {
  return told(presenceSchema.parse(await (await GET(new Request(url), context())).json()));
}

const told = ({ people }: { people: readonly { name: string; tile: string | null }[] }) =>
  people.map(({ name, tile }) => `${name}: ${tile ?? "no tile"}`);

async function countMoves(): Promise<number> {
  const rows = await database().select({ type: events.type }).from(events).orderBy(asc(events.id));
  return rows.filter(({ type }) => type === "people.moved").length;
}

/** As if nothing had been heard of anybody for so long. */
async function silence(ms: number): Promise<void> {
  for (const row of await database().select().from(presences)) {
    await writeTransaction((tx) =>
      tx
        .update(presences)
        .set({ seenAtMs: row.seenAtMs - ms })
        .where(eq(presences.sessionId, row.sessionId)),
    );
  }
}

test("who is here and on which tile, the viewer too; others hear of changes only", async () => {
  await signInAs(lead);
  expect(await post(null)).toEqual(["Lena Lead: no tile"]);
  expect(await countMoves()).toBe(1);
  expect(await post(null)).toEqual(["Lena Lead: no tile"]);
  expect(await countMoves()).toBe(1);
  await signInAs(viewer);
  expect(await post("B4")).toEqual(["Lena Lead: no tile", "Vera Viewer: B4"]);
  expect(await countMoves()).toBe(2);
  expect(await post("B5")).toEqual(["Lena Lead: no tile", "Vera Viewer: B5"]);
  expect(await countMoves()).toBe(3);
});

test("whoever is silent has gone, and the next word of anybody tells the others", async () => {
  await signInAs(lead);
  await post("A1");
  await silence(46_000);
  expect(await look()).toEqual([]);
  expect(await countMoves()).toBe(1);
  await signInAs(viewer);
  expect(await post(null)).toEqual(["Vera Viewer: no tile"]);
  expect(await countMoves()).toBe(2);
  await silence(44_000);
  await prunePresences(Date.now());
  expect(await look()).toEqual(["Vera Viewer: no tile"]);
  await silence(2_000);
  await prunePresences(Date.now());
  expect(await countMoves()).toBe(3);
  expect(await database().select().from(presences)).toEqual([]);
});

test("two browsers of one person are one person, on the tile of the last word", async () => {
  await signInAs(lead);
  await post("A1");
  await silence(1_000);
  await signInAs(lead);
  expect(await post("C2")).toEqual(["Lena Lead: C2"]);
});

test("signing out takes a person off the board at once", async () => {
  await signInAs(lead);
  await post("A1");
  const [session] = await database().select({ id: sessions.id }).from(sessions);
  if (!session) throw new Error("no session");
  await removeSession(session.id);
  expect(await countMoves()).toBe(2);
  await signInAs(viewer);
  expect(await look()).toEqual([]);
});

test("who is no longer in the project, or disabled, is not shown", async () => {
  await signInAs(viewer);
  await post("A1");
  await writeTransaction((tx) => tx.update(users).set({ disabledAtMs: 1 }).where(eq(users.id, viewer.id)));
  await signInAs(lead);
  expect(await look()).toEqual([]);
  await writeTransaction((tx) => tx.update(users).set({ disabledAtMs: null }).where(eq(users.id, viewer.id)));
  expect(await look()).toEqual(["Vera Viewer: A1"]);
  await writeTransaction((tx) => tx.delete(members).where(eq(members.userId, viewer.id)));
  expect(await look()).toEqual([]);
});

test("a tile is a short name or null", async () => {
  await signInAs(lead);
  for (const tile of [7, "", "a\nb", "x".repeat(41), undefined]) expect(await post(tile)).toBe(400);
  expect(await post("Stack 12")).toEqual(["Lena Lead: Stack 12"]);
});

test("whoever closes the board is off it at once, and the others are told", async () => {
  await signInAs(lead);
  await post("A1");
  const headers = { "content-type": "application/json" };
  const body = JSON.stringify({ tile: null, isLeaving: true });
  expect((await POST(new Request(url, { method: "POST", headers, body }), context())).status).toBe(200);
  expect(await look()).toEqual([]);
  expect(await countMoves()).toBe(2);
});
