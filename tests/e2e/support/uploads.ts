import { readFile, readdir } from "node:fs/promises";
import path from "node:path";
import { expect, type APIRequestContext, type APIResponse } from "@playwright/test";
import { progressSchema, type Progress } from "@/lib/frames/schema";

const TUS = { "tus-resumable": "1.0.0" };

export async function makeProject(request: APIRequestContext, name: string): Promise<string> {
  const answer = await request.post("/api/projects", { data: { name } });
  expect(answer.status(), await answer.text()).toBe(201);
  return (await answer.json()).id;
}

/** `Upload-Metadata` of tus 1.0.0: keys with base64 of UTF-8, separated by commas. */
export function tusMetadata(values: Readonly<Record<string, string>>): string {
  return Object.entries(values)
    .map(([key, value]) => `${key} ${Buffer.from(value, "utf8").toString("base64")}`.trim())
    .join(",");
}

export interface NewUpload {
  readonly metadata: Readonly<Record<string, string>>;
  readonly length: number;
}

export function createUpload(request: APIRequestContext, { metadata, length }: NewUpload): Promise<APIResponse> {
  return request.post("/api/uploads", {
    headers: { ...TUS, "upload-length": String(length), "upload-metadata": tusMetadata(metadata) },
  });
}

export function patchUpload(
  request: APIRequestContext,
  location: string,
  { bytes, offset }: { readonly bytes: Buffer; readonly offset: number },
): Promise<APIResponse> {
  return request.patch(location, {
    headers: { ...TUS, "upload-offset": String(offset), "content-type": "application/offset+octet-stream" },
    data: bytes,
  });
}

export function inspectUpload(request: APIRequestContext, location: string): Promise<APIResponse> {
  return request.head(location, { headers: TUS });
}

export interface FileToSend {
  readonly projectId: string;
  readonly name: string;
  readonly folder?: string;
  readonly bytes: Buffer;
}

/** One whole file, in two requests. */
export async function sendFile(request: APIRequestContext, file: FileToSend): Promise<void> {
  const { projectId, name, folder = "", bytes } = file;
  const metadata = { projectId, filename: name, folder, lastModified: "1751449272000" };
  const created = await createUpload(request, { metadata, length: bytes.length });
  expect(created.status(), await created.text()).toBe(201);
  if (bytes.length === 0) return;
  const sent = await patchUpload(request, created.headers().location ?? "", { bytes, offset: 0 });
  expect(sent.status(), await sent.text()).toBe(204);
}

/** Every file below a folder. */
export async function sendFolder(request: APIRequestContext, projectId: string, root: string): Promise<number> {
  const files = await listFiles(root);
  for (const file of files) {
    const name = path.posix.basename(file);
    const folder = path.posix.dirname(file) === "." ? "" : path.posix.dirname(file);
    await sendFile(request, { projectId, name, folder, bytes: await readFile(path.join(root, file)) });
  }
  return files.length;
}

/** Relative names, "/" between them. */
export async function listFiles(root: string): Promise<string[]> {
  const entries = await readdir(root, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => path.relative(root, path.join(entry.parentPath, entry.name)))
    .sort();
}

export async function readProgress(request: APIRequestContext, projectId: string): Promise<Progress> {
  const answer = await request.get(`/api/projects/${projectId}/progress`);
  expect(answer.status()).toBe(200);
  return progressSchema.parse(await answer.json());
}

/** Waits until everything received is measured and the proposal covers it. */
export async function waitUntilSorted(request: APIRequestContext, projectId: string): Promise<Progress> {
  await expect
    .poll(async () => (await readProgress(request, projectId)).sorted, { timeout: 120_000, intervals: [500] })
    .toBe(true);
  return readProgress(request, projectId);
}
