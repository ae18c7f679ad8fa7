import { expect, test } from "@playwright/test";
import { LEAD, inventPerson, signInByHttp } from "./support/people";
import { addAccount, addMember } from "./support/server";
import { createUpload, inspectUpload, makeProject, patchUpload, readProgress, tusMetadata } from "./support/uploads";

// tus resumable upload protocol 1.0.0 (tus.io/protocols/resumable-upload): creation, HEAD, PATCH, termination; and what
// the product's interface adds to it.
const BYTES = Buffer.from("not a picture, but bytes all the same");

test.beforeEach(async ({ request }) => {
  await signInByHttp(request, LEAD);
});

test("a script creates an upload, sends it in two parts and asks between them how far it is", async ({ request }) => {
  const projectId = await makeProject(request, "By script");
  const metadata = { projectId, filename: "NOTE 0001.jpg", folder: "a/b", lastModified: "1751449272000" };
  const created = await createUpload(request, { metadata, length: BYTES.length });
  expect(created.status()).toBe(201);
  const location = created.headers().location ?? "";
  expect(location).toMatch(/^\/api\/uploads\/[A-Za-z0-9_-]+$/);
  expect(await readProgress(request, projectId)).toMatchObject({ received: 0, total: 1, sorted: false });

  const first = await patchUpload(request, location, { bytes: BYTES.subarray(0, 10), offset: 0 });
  expect([first.status(), first.headers()["upload-offset"]]).toEqual([204, "10"]);
  const head = await inspectUpload(request, location);
  expect(head.headers()).toMatchObject({
    "upload-offset": "10",
    "upload-length": String(BYTES.length),
    "cache-control": "no-store",
    "tus-resumable": "1.0.0",
  });
  const wrong = await patchUpload(request, location, { bytes: BYTES, offset: 3 });
  expect(wrong.status()).toBe(409);
  const last = await patchUpload(request, location, { bytes: BYTES.subarray(10), offset: 10 });
  expect(last.status()).toBe(204);
  // Recorded before the answer: no waiting here.
  expect((await readProgress(request, projectId)).received).toBe(1);
});

test("a cancelled upload no longer counts", async ({ request }) => {
  const projectId = await makeProject(request, "Cancelled");
  const created = await createUpload(request, { metadata: { projectId, filename: "a.jpg" }, length: 10 });
  const location = created.headers().location ?? "";
  const ended = await request.delete(location, { headers: { "tus-resumable": "1.0.0" } });
  expect(ended.status()).toBe(204);
  expect([404, 410]).toContain((await inspectUpload(request, location)).status());
  expect(await readProgress(request, projectId)).toMatchObject({ received: 0, total: 0 });
});

test("an upload without project or name is refused, and so is one larger than the protocol's limit", async ({
  request,
}) => {
  const projectId = await makeProject(request, "Refusals");
  expect((await createUpload(request, { metadata: { filename: "a.jpg" }, length: 1 })).status()).toBe(400);
  expect((await createUpload(request, { metadata: { projectId }, length: 1 })).status()).toBe(400);
  const options = await request.fetch("/api/uploads", { method: "OPTIONS", headers: { "tus-resumable": "1.0.0" } });
  const mostBytes = Number(options.headers()["tus-max-size"]);
  expect(mostBytes).toBeGreaterThan(100_000_000);
  const metadata = { projectId, filename: "a.jpg" };
  expect((await createUpload(request, { metadata, length: mostBytes + 1 })).status()).toBe(413);
});

test("somebody else's upload, and another project's, do not exist", async ({ request, playwright, baseURL }) => {
  const projectId = await makeProject(request, "Not yours");
  const created = await createUpload(request, { metadata: { projectId, filename: "a.jpg" }, length: BYTES.length });
  const location = created.headers().location ?? "";
  const [editor, viewer, stranger] = [inventPerson("Ed Itor"), inventPerson("Vie Wer"), inventPerson("Stran Ger")];
  for (const person of [editor, viewer, stranger]) await addAccount(person);
  await addMember(projectId, editor, "editor");
  await addMember(projectId, viewer, "viewer");

  const expected: [typeof editor | null, number, number][] = [
    [editor, 201, 404],
    [viewer, 403, 404],
    [stranger, 404, 404],
    [null, 401, 401],
  ];
  for (const [person, creating, continuing] of expected) {
    const other = await playwright.request.newContext({ baseURL });
    if (person) await signInByHttp(other, person);
    const name = person?.name ?? "nobody";
    const made = await createUpload(other, { metadata: { projectId, filename: "b.jpg" }, length: 1 });
    expect(made.status(), `${name} creates`).toBe(creating);
    expect((await inspectUpload(other, location)).status(), `${name} asks`).toBe(continuing);
    const sent = await patchUpload(other, location, { bytes: BYTES, offset: 0 });
    expect(sent.status(), `${name} sends`).toBe(continuing);
    await other.dispose();
  }
  expect((await inspectUpload(request, location)).headers()["upload-offset"]).toBe("0");
});

test("another site's page cannot upload with a person's cookie", async ({ request }) => {
  const projectId = await makeProject(request, "Across sites");
  const headers = {
    "tus-resumable": "1.0.0",
    "upload-length": "1",
    "upload-metadata": tusMetadata({ projectId, filename: "a.jpg" }),
  };
  const foreign = await request.post("/api/uploads", { headers: { ...headers, origin: "https://elsewhere.example" } });
  expect(foreign.status()).toBe(403);
  expect(foreign.headers()["access-control-allow-origin"]).toBeUndefined();
  const crossSite = await request.post("/api/uploads", { headers: { ...headers, "sec-fetch-site": "cross-site" } });
  expect(crossSite.status()).toBe(403);
});
