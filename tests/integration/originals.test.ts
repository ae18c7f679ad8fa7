import { createHash, randomBytes } from "node:crypto";
import { readdir, readlink, rm, truncate } from "node:fs/promises";
import { beforeEach, expect, test } from "vitest";
import { eq } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, type Person, signInAs } from "../support/people";
import { uploadFile } from "../support/uploads";
import { GET, HEAD } from "@/app/api/projects/[projectId]/files/[fileId]/original/route";
import { database, writeTransaction } from "@/db/client";
import { files } from "@/db/schema/frames";
import type { ProjectId, UploadId } from "@/lib/ids";
import { originalPath } from "@/lib/storage/paths";

useDatabase();
let lead: Person;
let projectId: ProjectId;
const BYTES = randomBytes(700_001);
const SHA256 = createHash("sha256").update(BYTES).digest("hex");

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead);
  await signInAs(lead);
});

/** A stored file as the worker leaves it. */
async function bringIn(name: string, bytes: Buffer = BYTES) {
  await uploadFile(projectId, name, bytes);
  const [file] = await database()
    .select({ id: files.id, uploadId: files.uploadId })
    .from(files)
    .where(eq(files.name, name));
  if (!file) throw new Error("no file");
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  await writeTransaction((tx) =>
    tx.update(files).set({ sha256, mediaType: "image/jpeg" }).where(eq(files.id, file.id)),
  );
  return file;
}

function ask(fileId: string, headers: Record<string, string> = {}, method: "GET" | "HEAD" = "GET") {
  const handler = method === "GET" ? GET : HEAD;
  const request = new Request("http://localhost/", { method, headers });
  return handler(request, { params: Promise.resolve({ projectId, fileId }) });
}

const bodyOf = async (response: Response) => Buffer.from(await response.arrayBuffer());

test("every byte as it came in, with its length, kind, and SHA-256 as its tag", async () => {
  const { id } = await bringIn("HARB0001.JPG");
  const response = await ask(id);
  expect(response.status).toBe(200);
  expect(response.headers.get("content-length")).toBe("700001");
  expect(response.headers.get("content-type")).toBe("image/jpeg");
  expect(response.headers.get("accept-ranges")).toBe("bytes");
  expect(response.headers.get("etag")).toBe(`"${SHA256}"`);
  expect(
    createHash("sha256")
      .update(await bodyOf(response))
      .digest("hex"),
  ).toBe(SHA256);
});

test.each([
  ["plain name.jpg", `filename="plain name.jpg"`, "plain%20name.jpg"],
  [
    "Übersicht №7 – 東京 🗼.tif",
    `filename="_bersicht _7 _ __ __.tif"`,
    "%C3%9Cbersicht%20%E2%84%967%20%E2%80%93%20%E6%9D%B1%E4%BA%AC%20%F0%9F%97%BC.tif",
  ],
  [`it's "50%" (1); x=y.JPG`, `filename="it's _50__ (1); x=y.JPG"`, "it%27s%20_50%25_%20%281%29%3B%20x%3Dy.JPG"],
])("under the name that it had: %s", async (name, plain, encoded) => {
  // RFC 6266, 4.1 and 4.3; RFC 8187, 3.2.1 (attr-char); UTF-8 bytes by RFC 3629.
  const { id } = await bringIn(name);
  const response = await ask(id);
  expect(response.headers.get("content-disposition")).toBe(`attachment; ${plain}; filename*=UTF-8''${encoded}`);
  expect((await bodyOf(response)).equals(BYTES)).toBe(true);
});

test("HEAD says the same without a body, and knows no parts", async () => {
  const { id } = await bringIn("a.jpg");
  // RFC 9110, 14.2: a Range header of another method than GET is ignored.
  const response = await ask(id, { range: "bytes=0-9" }, "HEAD");
  expect([response.status, response.headers.get("content-length"), response.body]).toEqual([200, "700001", null]);
});

test("a part: 206, its place and its bytes; put together the parts are the whole", async () => {
  const { id } = await bringIn("a.jpg");
  const parts: Buffer[] = [];
  for (const range of ["bytes=0-299999", "bytes=300000-699999", "bytes=-1"]) {
    const response = await ask(id, { range });
    expect(response.status).toBe(206);
    parts.push(await bodyOf(response));
    expect(response.headers.get("content-length")).toBe(String(parts.at(-1)?.length));
  }
  expect(Buffer.concat(parts).equals(BYTES)).toBe(true);
  expect((await ask(id, { range: "bytes=10-19" })).headers.get("content-range")).toBe("bytes 10-19/700001");
});

test("beyond its end: 416 with its size and no body", async () => {
  const { id } = await bringIn("a.jpg");
  const response = await ask(id, { range: "bytes=700001-" });
  expect([response.status, response.headers.get("content-range")]).toEqual([416, "bytes */700001"]);
  expect(await response.text()).toBe("");
});

test("If-Range with another tag gives all of it, If-None-Match with this one nothing", async () => {
  const { id } = await bringIn("a.jpg");
  expect((await ask(id, { range: "bytes=0-9", "if-range": `"${SHA256}"` })).status).toBe(206);
  expect((await ask(id, { range: "bytes=0-9", "if-range": '"other"' })).status).toBe(200);
  const same = await ask(id, { "if-none-match": `"${SHA256}"` });
  expect([same.status, await same.text()]).toEqual([304, ""]);
});

test("an empty file is sent empty; one of another project, or none, is not found", async () => {
  const { id } = await bringIn("empty.jpg", Buffer.alloc(0));
  const response = await ask(id);
  expect([response.status, response.headers.get("content-length"), await response.text()]).toEqual([200, "0", ""]);
  projectId = await makeProject(lead, "Elsewhere");
  expect((await ask(id)).status).toBe(404);
  expect((await ask("none")).status).toBe(404);
});

test("bytes that are missing on the disk are said to be, in plain words", async () => {
  const { id, uploadId } = await bringIn("a.jpg");
  await rm(originalPath(uploadId));
  const response = await ask(id);
  expect(response.status).toBe(404);
  expect(await response.json()).toMatchObject({ detail: expect.stringContaining("missing in the storage") });
});

test("no more is read than is taken, so that memory does not grow with the file", async () => {
  const { id, uploadId } = await bringIn("a.jpg");
  const response = await ask(id);
  const reader = response.body?.getReader();
  const piece = await reader?.read();
  expect(piece?.value?.byteLength).toBe(256 * 1024);
  // What had been read ahead would still come.
  await truncate(originalPath(uploadId), 256 * 1024);
  await expect(reader?.read()).rejects.toThrow(/ends before byte 700000/);
  expect(await openNow(uploadId)).toBe(false);
});

test("whoever goes in the middle, or never reads, leaves no file open", async () => {
  const { id, uploadId } = await bringIn("a.jpg");
  await ask(id);
  expect(await openNow(uploadId)).toBe(false);
  const reader = (await ask(id)).body?.getReader();
  await reader?.read();
  expect(await openNow(uploadId)).toBe(true);
  await reader?.cancel();
  expect(await openNow(uploadId)).toBe(false);
});

/** Whether this process has the original open (proc(5), from memory). */
async function openNow(uploadId: UploadId): Promise<boolean> {
  const links = await Promise.all(
    (await readdir("/proc/self/fd")).map((fd) => readlink(`/proc/self/fd/${fd}`).catch(() => "")),
  );
  return links.includes(originalPath(uploadId));
}
