// Before anything that reads cookies.
import { makeProject } from "../support/people";
import { eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { writeTransaction } from "@/db/client";
import { projects } from "@/db/schema/projects";
import { useDatabase } from "../support/database";
import { listAppFiles } from "../support/routes";
import { ASKERS, comeAs, FILE_NAME, makeYard, PROJECT_NAME, type Asker, type Target } from "../support/yard";
import { GATE_CALLS, type Audience, type GateCall } from "./gate-calls";

useDatabase();

const METHODS = ["GET", "HEAD", "OPTIONS", "POST", "PUT", "PATCH", "DELETE"];

/** product.md: the table of rights, "not a member: 404, the administrator too"; interfaces.md: no session: 401. */
const REFUSED_WITHOUT_SESSION = {
  nobody: 401,
  "disabled editor": 401,
  "editor who has signed out": 401,
  forger: 401,
} as const;
const REFUSED_OUTSIDE = { "lead of another project": 404, "administrator who is no member": 404 } as const;
const REFUSALS: Record<Audience, Partial<Record<Asker, number>>> = {
  everybody: {},
  "signed in": REFUSED_WITHOUT_SESSION,
  view: { ...REFUSED_WITHOUT_SESSION, ...REFUSED_OUTSIDE },
  edit: { ...REFUSED_WITHOUT_SESSION, ...REFUSED_OUTSIDE, viewer: 403 },
  manage: { ...REFUSED_WITHOUT_SESSION, ...REFUSED_OUTSIDE, viewer: 403, editor: 403 },
  creator: { ...REFUSED_WITHOUT_SESSION, ...REFUSED_OUTSIDE, viewer: 404, lead: 404 },
};
const CODES: Record<number, string> = { 401: "unauthenticated", 403: "forbidden", 404: "not_found" };

type RouteModule = Record<string, (request: Request, context: { params: Promise<object> }) => Promise<Response>>;

async function loadRoute(file: string): Promise<RouteModule> {
  return (await import(`../../app/${file}`)) as RouteModule;
}

async function makeCall(file: string, call: GateCall, target: Target): Promise<Response> {
  const handler = (await loadRoute(file))[call.method];
  if (!handler) throw new Error(`${file} has no ${call.method}`);
  const request = new Request(`http://localhost:3000${call.path(target)}`, call.init?.(target));
  return handler(request, { params: Promise.resolve(call.params(target)) });
}

test("every route of the product is in the matrix, with every method it answers", async () => {
  const files = listAppFiles("route.ts");
  expect(Object.keys(GATE_CALLS).sort()).toEqual(files);
  for (const file of files.filter((name) => name !== "api/auth/[...nextauth]/route.ts")) {
    const exported = Object.keys(await loadRoute(file)).filter((name) => METHODS.includes(name));
    expect(GATE_CALLS[file]?.map(({ method }) => method).sort(), file).toEqual(exported.sort());
  }
});

const CALLS = Object.entries(GATE_CALLS).flatMap(([file, calls]) => calls.map((call) => ({ file, call })));

describe.each(CALLS)("$call.method $file", ({ file, call }) => {
  test.each(ASKERS)("%s", async (asker) => {
    const yard = await makeYard();
    await comeAs(asker, yard);
    const response = await makeCall(file, call, yard);
    const refusal = REFUSALS[call.audience][asker];
    expect(response.status).toBe(refusal ?? call.status);
    if (refusal === undefined) {
      await response.body?.cancel();
      return;
    }
    expect(response.headers.get("content-type")).toContain("application/problem+json");
    const text = await response.text();
    expect(text).not.toContain(PROJECT_NAME);
    expect(text).not.toContain(FILE_NAME);
    if (text !== "") expect(JSON.parse(text)).toMatchObject({ code: CODES[refusal], status: refusal });
  });
});

const CHANGES = CALLS.filter(({ call }) => call.audience === "edit" || call.audience === "manage");

test.each(CHANGES)("a project in the archive refuses $call.method $file to its lead", async ({ file, call }) => {
  const yard = await makeYard();
  await comeAs("lead", yard);
  await writeTransaction((tx) => tx.update(projects).set({ archivedAtMs: 1 }).where(eq(projects.id, yard.projectId)));
  const response = await makeCall(file, call, yard);
  // Deleting is possible from the archive; everything else asks for it to be taken out first.
  if (file === "api/projects/[projectId]/route.ts" && call.method === "DELETE") {
    expect(response.status).toBe(200);
    return;
  }
  expect(response.status).toBe(409);
  expect(await response.json()).toMatchObject({
    code: "conflict",
    detail: expect.stringContaining("out of the archive first"),
  });
});

const LOOKS = CALLS.filter(({ call }) => call.audience === "view");

test.each(LOOKS)("a project in the archive still answers $call.method $file to its viewer", async ({ file, call }) => {
  const yard = await makeYard();
  await comeAs("viewer", yard);
  await writeTransaction((tx) => tx.update(projects).set({ archivedAtMs: 1 }).where(eq(projects.id, yard.projectId)));
  const response = await makeCall(file, call, yard);
  expect(response.status).toBe(call.status);
  await response.body?.cancel();
});

test.each(LOOKS)("an id that is none answers 404 to $call.method $file", async ({ file, call }) => {
  const yard = await makeYard();
  await comeAs("lead", yard);
  const handler = (await loadRoute(file))[call.method];
  const params = Object.fromEntries(Object.keys(call.params(yard)).map((name) => [name, "../../etc"]));
  const request = new Request(`http://localhost:3000${call.path(yard)}`);
  expect((await handler?.(request, { params: Promise.resolve(params) }))?.status).toBe(404);
});

test.each(LOOKS.filter(({ file }) => file.includes("[frameId]")))(
  "a frame of another project answers 404 to $call.method $file",
  async ({ file, call }) => {
    const yard = await makeYard();
    const elsewhere = await makeProject(yard.people.editor, "The editor's own");
    await comeAs("editor", yard);
    const response = await makeCall(file, call, { ...yard, projectId: elsewhere });
    expect(response.status).toBe(404);
  },
);
