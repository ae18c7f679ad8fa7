import { createHash } from "node:crypto";
import { appendFileSync, existsSync, readFileSync, truncateSync, writeFileSync } from "node:fs";
import path from "node:path";
import { beforeEach, describe, expect, test } from "vitest";
import { addMember, makePerson, makeProject, type Person, signInAs, signOut } from "../support/people";
import { useDatabase } from "../support/database";
import {
  askProtocol,
  createUpload,
  deleteUpload,
  headUpload,
  idOf,
  patchUpload,
  tusMetadata,
  uploadFile,
} from "../support/uploads";
import { DELETE, PATCH } from "@/app/api/uploads/[[...path]]/route";
import { database } from "@/db/client";
import { jobs } from "@/db/schema/jobs";
import { accessForJob } from "@/lib/auth/gate";
import { getProgress, listIntakeFiles } from "@/lib/frames/reads";
import type { ProjectId } from "@/lib/ids";
import { finishCompleteUploads } from "@/lib/intake/finish";
import { getIntakeList } from "@/lib/intake/intake-list";
import { environment } from "@/lib/env";
import { deleteProject } from "@/lib/projects/writes";

const storageDir = useDatabase();
const BYTES = Buffer.from(Array.from({ length: 100 }, (_, i) => (i * 37) % 256));

let lead: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead);
  await signInAs(lead);
});

async function begin(name = "HARB0001.JPG", lengthBytes = BYTES.length): Promise<string> {
  const created = await createUpload({ projectId, filename: name }, lengthBytes);
  expect(created.status).toBe(201);
  return created.headers.get("location") ?? "";
}

const progress = () => getProgress(accessForJob({ projectId }));
const listed = () => listIntakeFiles(accessForJob({ projectId }));
const stored = (id: string) => readFileSync(path.join(storageDir, "originals", id));
const sha256 = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");

describe("the protocol (tus 1.0.0)", () => {
  test("length 100, offset 70: 30 bytes at 70 answer 204 and offset 100, the same again 409", async () => {
    // check-values.md, E47; tus 1.0.0, Core Protocol, PATCH.
    const location = await begin();
    expect((await patchUpload(location, BYTES.subarray(0, 70), 0)).headers.get("upload-offset")).toBe("70");
    const last = await patchUpload(location, BYTES.subarray(70), 70);
    expect([last.status, last.headers.get("upload-offset")]).toEqual([204, "100"]);
    expect((await patchUpload(location, BYTES.subarray(70), 70)).status).toBe(409);
    expect(sha256(stored(idOf(location)))).toBe(sha256(BYTES));
  });

  test("states what it speaks, and lets no other site's page read it", async () => {
    const options = await askProtocol();
    expect(options.status).toBe(204);
    expect(Object.fromEntries(options.headers)).toMatchObject({
      "tus-version": "1.0.0",
      "tus-extension": "creation,creation-with-upload,termination",
      "tus-max-size": String(4 * 1024 ** 3),
    });
    const created = await createUpload({ projectId, filename: "a.jpg" }, 10);
    for (const { headers } of [options, created]) {
      expect([...headers.keys()].filter((name) => name.startsWith("access-control"))).toEqual([]);
    }
    expect(created.headers.get("location")).toMatch(/^\/api\/uploads\/[A-Za-z0-9_-]+$/);
  });

  test("HEAD says how far it is and gives the metadata back as they were sent", async () => {
    const metadata = {
      projectId,
      filename: "Hafen öst.JPG",
      folder: "a/b",
      lastModified: "1751449272000",
      camera: "2",
    };
    const created = await createUpload(metadata, 100);
    const location = created.headers.get("location") ?? "";
    await patchUpload(location, BYTES.subarray(0, 30), 0);
    const head = await headUpload(location);
    expect(head.status).toBe(200);
    expect(Object.fromEntries(head.headers)).toMatchObject({
      "upload-offset": "30",
      "upload-length": "100",
      "upload-metadata": tusMetadata(metadata),
      "cache-control": "no-store",
      "tus-resumable": "1.0.0",
    });
  });

  test("the first bytes may come with the creation", async () => {
    const created = await createUpload({ projectId, filename: "a.jpg" }, 100, {}, BYTES);
    expect([created.status, created.headers.get("upload-offset")]).toEqual([201, "100"]);
    expect((await progress()).received).toBe(1);
  });

  test("what is not supported is refused in words: other versions, checksums, parts, lengths to come", async () => {
    const metadata = { projectId, filename: "a.jpg" };
    const refused = [
      await createUpload(metadata, 10, { "tus-resumable": "0.2.2" }),
      await createUpload(metadata, 10, { "upload-checksum": "sha1 aaaa" }),
      await createUpload(metadata, 10, { "upload-concat": "partial" }),
      await createUpload(metadata, 10, { "upload-defer-length": "1" }),
      await createUpload(metadata, 4 * 1024 ** 3 + 1),
      await patchUpload(await begin(), BYTES, 0, { "content-type": "image/jpeg" }),
    ];
    expect(refused.map(({ status }) => status)).toEqual([412, 400, 501, 501, 413, 415]);
    for (const answer of refused) {
      expect(answer.headers.get("content-type")).toBe("application/problem+json");
      expect(answer.headers.get("tus-resumable")).toBe("1.0.0");
      expect(await answer.json()).toMatchObject({ code: expect.any(String), detail: expect.stringMatching(/\.$/) });
    }
    // The one that stands is the one that PATCH was refused for.
    expect((await progress()).total).toBe(1);
  });

  test("more than was announced is refused and not kept", async () => {
    const location = await begin("a.jpg", 10);
    expect((await patchUpload(location, BYTES, 0)).status).toBe(413);
    expect((await headUpload(location)).headers.get("upload-offset")).toBe("0");
  });

  test("fewer bytes than Content-Length says are no success", async () => {
    const location = await begin();
    const short = await patchUpload(location, BYTES.subarray(0, 40), 0, { "content-length": "100" });
    expect(short.status).toBe(409);
    expect((await headUpload(location)).headers.get("upload-offset")).toBe("40");
  });
});

describe("the record", () => {
  test("a finished upload has its file, its frame and its job before the answer", async () => {
    const id = await uploadFile(projectId, "HARB0001.JPG", BYTES, "/card//1/");
    expect(await progress()).toEqual({ received: 1, analysed: 0, failed: 0, total: 1, sorted: false });
    const [file] = await listed();
    expect(file).toMatchObject({ name: "HARB0001.JPG", folder: "card/1", bytes: 100, state: "received" });
    expect(file?.frameId).not.toBeNull();
    expect(await database().select({ kind: jobs.kind, state: jobs.state }).from(jobs)).toEqual([
      { kind: "analyse-file", state: "waiting" },
    ]);
    expect(sha256(stored(id))).toBe(sha256(BYTES));
  });

  test("an empty file is recorded at its creation", async () => {
    await uploadFile(projectId, "empty.jpg", Buffer.alloc(0));
    expect(await progress()).toMatchObject({ received: 1, total: 1 });
  });

  test("a raw file and its JPEG are one frame, whichever comes first; another folder's is its own", async () => {
    await uploadFile(projectId, "ABCD0001.JPG", BYTES, "100");
    await uploadFile(projectId, "ABCD0001.CR2", BYTES, "100");
    await uploadFile(projectId, "ABCD0002.NEF", BYTES, "100");
    await uploadFile(projectId, "abcd0002.jpg", BYTES, "100");
    await uploadFile(projectId, "ABCD0001.CR2", BYTES, "101");
    const frameOf = new Map((await listed()).map(({ folder, name, frameId }) => [`${folder}/${name}`, frameId]));
    expect(frameOf.get("100/ABCD0001.CR2")).toBe(frameOf.get("100/ABCD0001.JPG"));
    expect(frameOf.get("100/ABCD0002.NEF")).toBe(frameOf.get("100/abcd0002.jpg"));
    expect(frameOf.get("101/ABCD0001.CR2")).toBeNull();
    expect(frameOf.get("100/ABCD0001.JPG")).not.toBe(frameOf.get("100/abcd0002.jpg"));
  });

  const names = [
    'with "quotes", comma; and \\ backslash.jpg',
    "...dots...jpg",
    "📷 Hafen 🌊.jpg",
    "שלום \u200Fabc.jpg",
    "cafe\u0301.jpg",
    `${"x".repeat(296)}.jpg`,
    " leading and trailing .jpg ",
    "line\nbreak.jpg",
    "=1+1.jpg",
  ];
  test.each(names)("the name %j is kept as it is, and is no path", async (name) => {
    const id = await uploadFile(projectId, name, BYTES, "ордер/📁");
    expect(await listed()).toMatchObject([{ name, folder: "ордер/📁" }]);
    expect(id).toMatch(/^[A-Za-z0-9_-]+$/);
    expect(existsSync(path.join(storageDir, "originals", id))).toBe(true);
  });

  const refused: [string, Record<string, string>][] = [
    ["no project", { filename: "a.jpg" }],
    ["no name", { projectId: "PROJECT" }],
    ["an empty name", { projectId: "PROJECT", filename: "" }],
    ["a name with a slash", { projectId: "PROJECT", filename: "../../etc/passwd" }],
    ["a name with NUL", { projectId: "PROJECT", filename: "a\0.jpg" }],
    ["dots for a name", { projectId: "PROJECT", filename: ".." }],
    ["a folder that leads out", { projectId: "PROJECT", filename: "a.jpg", folder: "a/../../b" }],
    ["a time that is none", { projectId: "PROJECT", filename: "a.jpg", lastModified: "yesterday" }],
    ["a name beyond all bounds", { projectId: "PROJECT", filename: "x".repeat(1025) }],
  ];
  test.each(refused)("%s is refused in words", async (_what, metadata) => {
    const filled = { ...metadata, ...(metadata.projectId ? { projectId } : {}) };
    const answer = await createUpload(filled, 10);
    expect(answer.status).toBe(400);
    expect(await answer.json()).toMatchObject({ code: "invalid", detail: expect.stringContaining("Upload-Metadata") });
    expect((await progress()).total).toBe(0);
  });

  test("metadata that are no UTF-8, no base64, or say a thing twice are refused", async () => {
    const good = tusMetadata({ projectId });
    for (const bad of [`${good},filename //8=`, `${good},filename *`, `${good},filename YQ==,filename Yg==`]) {
      expect((await createUpload({}, 10, { "upload-metadata": bad })).status).toBe(400);
    }
  });
});

describe("who may", () => {
  test("a viewer, a stranger and nobody cannot create; another editor cannot touch it", async () => {
    const [editor, viewer, stranger] = [await makePerson("Ed"), await makePerson("Vi"), await makePerson("Stran")];
    await addMember(projectId, editor, "editor");
    await addMember(projectId, viewer, "viewer");
    const location = await begin();
    const outcomes = [];
    for (const person of [editor, viewer, stranger, null]) {
      if (person) await signInAs(person);
      else signOut();
      const answers = [
        await createUpload({ projectId, filename: "a.jpg" }, 10),
        await headUpload(location),
        await patchUpload(location, BYTES, 0),
        await deleteUpload(location),
      ];
      outcomes.push(answers.map(({ status }) => status));
    }
    expect(outcomes).toEqual([
      [201, 404, 404, 404],
      [403, 404, 404, 404],
      [404, 404, 404, 404],
      [401, 401, 401, 401],
    ]);
    await signInAs(lead);
    expect((await headUpload(location)).headers.get("upload-offset")).toBe("0");
  });

  test("the upload that is acted on is the one that the gate has looked at, whatever the query says", async () => {
    const theirs = await begin();
    const editor = await makePerson("Ed");
    await addMember(projectId, editor, "editor");
    await signInAs(editor);
    const own = await begin("OWN.JPG");
    const url = `http://localhost:3000${own}?x=/${idOf(theirs)}`;
    const request = new Request(url, { method: "DELETE", headers: { "tus-resumable": "1.0.0" } });
    expect((await DELETE(request, { params: Promise.resolve({ path: [idOf(own)] }) })).status).toBe(204);
    expect((await headUpload(own)).status).toBe(404);
    await signInAs(lead);
    expect((await headUpload(theirs)).status).toBe(200);
  });

  test("another site's page cannot upload with a person's cookie", async () => {
    const metadata = { projectId, filename: "a.jpg" };
    const foreign = await createUpload(metadata, 10, { origin: "https://elsewhere.example" });
    const crossSite = await createUpload(metadata, 10, { "sec-fetch-site": "cross-site" });
    expect([foreign.status, crossSite.status]).toEqual([403, 403]);
  });
});

describe("nothing is lost", () => {
  test("a cancelled upload no longer counts and its bytes are gone", async () => {
    const location = await begin();
    await patchUpload(location, BYTES.subarray(0, 50), 0);
    expect((await deleteUpload(location)).status).toBe(204);
    expect(await progress()).toMatchObject({ received: 0, total: 0 });
    expect((await headUpload(location)).status).toBe(404);
    expect(existsSync(path.join(storageDir, "originals", idOf(location)))).toBe(false);
  });

  test("bytes for a project that is deleted while they come in find no upload", async () => {
    const location = await begin();
    const bytes = new ReadableStream<Uint8Array>({
      async start(controller) {
        controller.enqueue(BYTES.subarray(0, 50));
        await expect.poll(() => stored(idOf(location)).length).toBe(50);
        await deleteProject(accessForJob({ projectId }), "Harbour");
        controller.enqueue(BYTES.subarray(50));
        controller.close();
      },
    });
    const headers = {
      "tus-resumable": "1.0.0",
      "content-type": "application/offset+octet-stream",
      "upload-offset": "0",
    };
    const init = { method: "PATCH", headers, body: bytes, duplex: "half" };
    const request = new Request(`http://localhost:3000${location}`, init as RequestInit);
    const answer = await PATCH(request, { params: Promise.resolve({ path: [idOf(location)] }) });
    expect([answer.status, await answer.json()]).toMatchObject([404, { code: "not_found" }]);
    expect(existsSync(path.join(storageDir, "originals", idOf(location)))).toBe(false);
  });

  test("an original that has arrived cannot be cancelled away", async () => {
    const location = await begin();
    await patchUpload(location, BYTES, 0);
    expect((await deleteUpload(location)).status).toBe(403);
    expect(sha256(stored(idOf(location)))).toBe(sha256(BYTES));
    expect((await progress()).received).toBe(1);
  });

  test("a process killed between the last byte and its record: the recovery records it, once", async () => {
    // What such a process leaves behind: all bytes in the file, no record (stack.md, trap 13).
    const location = await begin();
    await patchUpload(location, BYTES.subarray(0, 60), 0);
    appendFileSync(path.join(storageDir, "originals", idOf(location)), BYTES.subarray(60));
    expect((await progress()).received).toBe(0);
    // Its last byte is fresh: a living process may be about to record it.
    expect(await finishCompleteUploads(Date.now() - 60_000)).toBe(0);
    const later = () => Date.now() + 1;
    const finished = await Promise.all([finishCompleteUploads(later()), finishCompleteUploads(later())]);
    expect(Math.max(...finished)).toBe(1);
    expect(await progress()).toMatchObject({ received: 1, total: 1 });
    expect(await listed()).toHaveLength(1);
    expect(await finishCompleteUploads(later())).toBe(0);
  });

  test("the same is recorded when its client asks how far it is, and can then not be cancelled", async () => {
    const location = await begin();
    writeFileSync(path.join(storageDir, "originals", idOf(location)), BYTES);
    expect((await headUpload(location)).headers.get("upload-offset")).toBe("100");
    expect((await progress()).received).toBe(1);
    const other = await begin("b.jpg");
    writeFileSync(path.join(storageDir, "originals", idOf(other)), BYTES);
    expect((await deleteUpload(other)).status).toBe(403);
    expect((await progress()).received).toBe(2);
  });

  test("an unfinished upload is not recorded, and is listed with how far it is", async () => {
    const location = await begin();
    await patchUpload(location, BYTES.subarray(0, 60), 0);
    expect(await finishCompleteUploads(Date.now() + 1)).toBe(0);
    const { uploads } = await getIntakeList(accessForJob({ projectId }));
    expect(uploads).toMatchObject([{ url: location, bytes: 100, receivedBytes: 60, name: "HARB0001.JPG" }]);
    truncateSync(path.join(storageDir, "originals", idOf(location)), 20);
    expect((await headUpload(location)).headers.get("upload-offset")).toBe("20");
  });

  test("the storage reserve refuses new uploads and more bytes with 507, and keeps what is there", async () => {
    const location = await begin();
    await patchUpload(location, BYTES.subarray(0, 60), 0);
    const settings = environment() as { storageReserveBytes: number };
    const before = settings.storageReserveBytes;
    settings.storageReserveBytes = Number.MAX_SAFE_INTEGER;
    try {
      const created = await createUpload({ projectId, filename: "b.jpg" }, 10);
      const continued = await patchUpload(location, BYTES.subarray(60), 60);
      expect([created.status, continued.status]).toEqual([507, 507]);
      expect(await created.json()).toMatchObject({ code: "storage_full", detail: expect.stringContaining("full") });
    } finally {
      settings.storageReserveBytes = before;
    }
    expect(await progress()).toMatchObject({ received: 0, total: 1 });
    expect((await patchUpload(location, BYTES.subarray(60), 60)).status).toBe(204);
  });
});
