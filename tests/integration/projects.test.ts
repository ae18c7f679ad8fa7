// Before anything that reads cookies.
import { addMember, makePerson, makeProject, signInAs, type Person } from "../support/people";
import { existsSync } from "node:fs";
import { writeFile } from "node:fs/promises";
import { count, eq } from "drizzle-orm";
import { expect, test } from "vitest";
import { GET as listRoute, POST as createRoute } from "@/app/api/projects/route";
import { DELETE as deleteRoute, GET as getRoute, PATCH as patchRoute } from "@/app/api/projects/[projectId]/route";
import { database, writeTransaction } from "@/db/client";
import { questions } from "@/db/schema/board";
import { files, frames, stacks, uploads } from "@/db/schema/frames";
import { jobs } from "@/db/schema/jobs";
import { members, projects } from "@/db/schema/projects";
import { removals } from "@/db/schema/removals";
import type { ProjectId } from "@/lib/ids";
import { stackIdSchema } from "@/lib/ids";
import { sweepRemovals } from "@/lib/projects/writes";
import { originalPath, previewPath } from "@/lib/storage/paths";
import { useDatabase } from "../support/database";
import { addStoredFrame } from "../support/full-project";

useDatabase();

const BASE = "http://localhost:3000/api/projects";

function send(method: string, body: unknown, headers: Record<string, string> = {}): Request {
  const text = typeof body === "string" ? body : JSON.stringify(body);
  return new Request(BASE, { method, headers: { "content-type": "application/json", ...headers }, body: text });
}
const none = { params: Promise.resolve({}) };
const of = (projectId: ProjectId) => ({ params: Promise.resolve({ projectId }) });
const create = (body: unknown, headers?: Record<string, string>) => createRoute(send("POST", body, headers), none);
const patch = (id: ProjectId, body: unknown) => patchRoute(send("PATCH", body), of(id));
const remove = (id: ProjectId, confirmation: unknown) => deleteRoute(send("DELETE", { confirmation }), of(id));

async function signedIn(name = "Ada"): Promise<Person> {
  const person = await makePerson(name);
  await signInAs(person);
  return person;
}

test("whoever makes a project is its lead, and it has what was asked for", async () => {
  const ada = await signedIn();
  const answer = await create({ name: "  Harbour  ", overlapWanted: 0.4, framesPerTile: { least: 5, most: 9 } });
  expect(answer.status).toBe(201);
  const project = await answer.json();
  expect(answer.headers.get("location")).toBe(`/api/projects/${project.id}`);
  expect(project).toMatchObject({
    name: "Harbour",
    role: "lead",
    overlapWanted: 0.4,
    framesPerTile: { least: 5, most: 9 },
    frames: 0,
    tiles: 0,
    openQuestions: 0,
    bytes: 0,
    isArchived: false,
    members: [{ userId: ada.id, name: "Ada", role: "lead" }],
  });
  expect(await (await getRoute(new Request(BASE), of(project.id))).json()).toEqual(project);
});

test.each([
  [{}, /name/],
  [{ name: 7 }, /name/],
  [{ name: "   " }, /name/],
  [{ name: "x".repeat(121) }, /120/],
  [{ name: "a\u202Eb" }, /direction/],
  [{ name: "a\nb" }, /line breaks/],
  [{ name: "A", overlapWanted: -0.01 }, /overlapWanted/],
  [{ name: "A", overlapWanted: 0.96 }, /overlapWanted/],
  [{ name: "A", overlapWanted: "0.3" }, /overlapWanted/],
  [{ name: "A", framesPerTile: { least: 5 } }, /framesPerTile/],
  [{ name: "A", framesPerTile: { least: 0, most: 3 } }, /framesPerTile/],
  [{ name: "A", framesPerTile: { least: 1.5, most: 3 } }, /framesPerTile/],
  [{ name: "A", framesPerTile: { least: 6, most: 5 } }, /framesPerTile/],
  [{ name: "A", overlap: 0.3 }, /overlap/],
  [[], /object/],
  ["{", /JSON/],
])("%j answers 400 and says why", async (body, message) => {
  await signedIn();
  const answer = await create(body);
  expect(answer.status).toBe(400);
  expect(answer.headers.get("content-type")).toBe("application/problem+json");
  expect(await answer.json()).toMatchObject({ code: "invalid", detail: expect.stringMatching(message) });
});

test.each([0, 0.95])("an overlap of %d is taken", async (overlapWanted) => {
  await signedIn();
  expect(await (await create({ name: "A", overlapWanted })).json()).toMatchObject({ overlapWanted });
});

test("what is not JSON answers 415, what comes from another site 403", async () => {
  await signedIn();
  expect((await create({ name: "A" }, { "content-type": "text/plain" })).status).toBe(415);
  expect((await create({ name: "A" }, { origin: "https://elsewhere.example" })).status).toBe(403);
  expect((await create({ name: "A" }, { "sec-fetch-site": "cross-site" })).status).toBe(403);
  // interfaces.md: the Origin may be APP_URL's or the request's own Host; scripts send none.
  expect((await create({ name: "A" }, { origin: "http://127.0.0.1:3000" })).status).toBe(201);
  expect((await create({ name: "A" }, { origin: "http://yard:8080", host: "yard:8080" })).status).toBe(201);
});

test("the list has the person's own projects only, with role, counts and people", async () => {
  const ada = await makePerson("Ada");
  const bo = await makePerson("Bo");
  const shared = await makeProject(ada, "Shared");
  await makeProject(ada, "Not Bo's");
  await addMember(shared, bo, "viewer");
  const { storedBytes } = await addStoredFrame(shared, ada, "A_0001.jpg");
  await addStack(shared, { id: "s1", row: 1, column: 1, take: 1 });
  await addStack(shared, { id: "s2", row: 1, column: 1, take: 2 });
  await addStack(shared, { id: "s3", row: 1, column: 2, take: 1 });
  await addStack(shared, { id: "s4", row: null, column: null, take: 1 });
  await addQuestion(shared, "open", null);
  await addQuestion(shared, "settled", 1);
  await signInAs(bo);
  const { projects: listed } = await (await listRoute(new Request(BASE), none)).json();
  expect(listed).toEqual([
    expect.objectContaining({
      id: shared,
      name: "Shared",
      role: "viewer",
      frames: 1,
      tiles: 2,
      openQuestions: 1,
      bytes: storedBytes / 4,
      members: [
        { userId: ada.id, name: "Ada", role: "lead" },
        { userId: bo.id, name: "Bo", role: "viewer" },
      ],
    }),
  ]);
});

test("settings that the sorting rests on ask for a new one; a new name does not", async () => {
  const id = await makeProject(await signedIn());
  const state = async () => {
    const [project] = await database()
      .select({ version: projects.contentVersion })
      .from(projects)
      .where(eq(projects.id, id));
    const [waiting] = await database().select({ n: count() }).from(jobs).where(eq(jobs.kind, "sort-project"));
    return [project?.version, waiting?.n];
  };
  expect(await (await patch(id, { name: "New name" })).json()).toMatchObject({ name: "New name" });
  expect(await state()).toEqual([0, 0]);
  const change = {
    longestPauseSeconds: 12.5,
    expectedRows: 3,
    expectedColumns: 6,
    framesPerTile: { least: 2, most: 7 },
  };
  expect(await (await patch(id, change)).json()).toMatchObject({ name: "New name", ...change });
  expect(await state()).toEqual([1, 1]);
  // A form sends all of them, changed or not.
  await patch(id, { ...change, name: "Newer name" });
  expect(await state()).toEqual([1, 1]);
  expect(await (await patch(id, { longestPauseSeconds: null })).json()).toMatchObject({ longestPauseSeconds: null });
  expect(await state()).toEqual([2, 1]);
});

test.each([
  [{}],
  [{ longestPauseSeconds: 0 }],
  [{ longestPauseSeconds: -1 }],
  [{ longestPauseSeconds: 1e9 }],
  [{ expectedRows: 0 }],
  [{ expectedRows: 703 }],
  [{ isArchived: "yes" }],
  [{ revision: 7 }],
])("the change %j answers 400", async (change) => {
  const id = await makeProject(await signedIn());
  expect((await patch(id, change)).status).toBe(400);
});

test("a project goes into the archive and comes out again; in it nothing else changes", async () => {
  const id = await makeProject(await signedIn());
  expect(await (await patch(id, { isArchived: true })).json()).toMatchObject({ isArchived: true });
  expect((await patch(id, { name: "Other" })).status).toBe(409);
  expect((await getRoute(new Request(BASE), of(id))).status).toBe(200);
  expect(await (await patch(id, { isArchived: false })).json()).toMatchObject({ isArchived: false, name: "Harbour" });
  expect((await patch(id, { name: "Other" })).status).toBe(200);
});

test("deleting asks for the name, frees the project's files and says how much, and touches no other's", async () => {
  const ada = await signedIn();
  const id = await makeProject(ada, "Harbour");
  const other = await makeProject(ada, "Other");
  const gone = [await addStoredFrame(id, ada, "A_0001.jpg"), await addStoredFrame(id, ada, "A_0002.jpg")];
  const kept = await addStoredFrame(other, ada, "A_0001.jpg");
  for (const wrong of ["", "harbour", "Harbou", "Other"]) {
    const answer = await remove(id, wrong);
    expect(answer.status).toBe(400);
    expect(await answer.json()).toMatchObject({ fields: [{ field: "confirmation" }] });
  }
  expect((await remove(id, undefined)).status).toBe(400);
  expect(gone.every(({ uploadId }) => existsSync(originalPath(uploadId)))).toBe(true);

  const answer = await remove(id, "Harbour");
  expect(answer.status).toBe(200);
  expect(await answer.json()).toEqual({ freedBytes: gone.reduce((sum, { storedBytes }) => sum + storedBytes, 0) });
  for (const { uploadId, fileId } of gone) {
    expect([existsSync(originalPath(uploadId)), existsSync(previewPath(fileId))]).toEqual([false, false]);
  }
  expect([existsSync(originalPath(kept.uploadId)), existsSync(previewPath(kept.fileId))]).toEqual([true, true]);
  for (const table of [files, frames, uploads, members]) {
    const rows = await database().select({ projectId: table.projectId }).from(table);
    expect(rows).toEqual([{ projectId: other }]);
  }
  expect((await getRoute(new Request(BASE), of(id))).status).toBe(404);
});

test("a deletion killed between rows and files is finished by the sweep, and nothing unrecorded is ever swept", async () => {
  const ada = await signedIn();
  const id = await makeProject(ada, "Harbour");
  const { uploadId, fileId, storedBytes } = await addStoredFrame(id, ada, "A_0001.jpg");
  const bytes = storedBytes / 4;
  await remove(id, "Harbour");
  // As if the process had died before the files went, and a preview had been written late.
  await writeFile(originalPath(uploadId), Buffer.alloc(bytes));
  await writeFile(previewPath(fileId), Buffer.alloc(bytes));
  const stranger = originalPath(uploadId).replace(uploadId, "not-in-the-database");
  await writeFile(stranger, "an original that a restored database does not know");

  expect(await sweepRemovals(Date.now())).toBe(0);
  expect(existsSync(originalPath(uploadId))).toBe(true);
  const later = Date.now() + 3 * 60 * 1000;
  expect(await sweepRemovals(later)).toBe(2 * bytes);
  expect([existsSync(originalPath(uploadId)), existsSync(previewPath(fileId))]).toEqual([false, false]);
  expect(existsSync(stranger)).toBe(true);
  expect(await database().select({ id: removals.id }).from(removals)).toEqual([]);
  expect(await sweepRemovals(later)).toBe(0);
});

test("of two deletions at once one frees, the other finds nothing", async () => {
  const ada = await signedIn();
  const id = await makeProject(ada, "Harbour");
  await addStoredFrame(id, ada, "A_0001.jpg");
  const statuses = (await Promise.all([remove(id, "Harbour"), remove(id, "Harbour")])).map(({ status }) => status);
  expect(statuses.sort()).toEqual([200, 404]);
});

interface Place {
  readonly id: string;
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number;
}

async function addStack(projectId: ProjectId, { id, ...place }: Place): Promise<void> {
  const rest = {
    isChosenTake: true,
    placedBy: "computation" as const,
    confidence: 1,
    reason: "",
    spotX: 0.5,
    spotY: 0.5,
  };
  await writeTransaction((tx) =>
    tx.insert(stacks).values({ id: stackIdSchema.parse(id), projectId, ...place, ...rest }),
  );
}

async function addQuestion(projectId: ProjectId, key: string, settledAtMs: number | null): Promise<void> {
  const rest = {
    kind: "hole" as const,
    message: "",
    evidence: "",
    frameIds: [],
    stackIds: [],
    answers: [],
    severity: 1,
  };
  await writeTransaction((tx) => tx.insert(questions).values({ id: key, projectId, key, settledAtMs, ...rest }));
}
