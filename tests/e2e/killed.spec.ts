import { createHash } from "node:crypto";
import { mkdtemp, readdir, readFile, rm, stat } from "node:fs/promises";
import { request as httpRequest } from "node:http";
import { tmpdir } from "node:os";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { createClient } from "@libsql/client";
import { expect, test, type APIRequestContext } from "@playwright/test";
import sharp from "sharp";
import { makeRandom } from "@/scripts/demo/seeded-random";
import { inventPerson, signInByHttp } from "./support/people";
import { TwoProcesses } from "./support/two-processes";
import { createUpload, inspectUpload, makeProject, readProgress, waitUntilSorted } from "./support/uploads";

// The product's own promise (interfaces.md): a file is recorded before the answer to its last byte is sent, and what was
// acknowledged is never lost. Web and worker are killed outright (SIGKILL), so nothing of theirs can tidy up.

let storageDir = "";
let product: TwoProcesses;

test.beforeEach(async () => {
  storageDir = await mkdtemp(path.join(tmpdir(), "stackyard-killed-"));
  product = await TwoProcesses.make(storageDir);
});

test.afterEach(async () => {
  await product.end();
  await rm(storageDir, { recursive: true, force: true });
});

interface Sent {
  readonly name: string;
  readonly bytes: Buffer;
  readonly location: string;
}

interface Yard {
  readonly request: APIRequestContext;
  readonly projectId: string;
  readonly cookie: string;
}

/** Noise compresses to nothing smaller: each picture is some megabytes, and none is like another. */
function makePicture(seed: number): Promise<Buffer> {
  const random = makeRandom(seed);
  const size = { width: 900, height: 600, channels: 3 } as const;
  const pixels = Buffer.from(Uint8Array.from({ length: size.width * size.height * 3 }, () => random.next() * 256));
  return sharp(pixels, { raw: size }).png({ compressionLevel: 0 }).toBuffer();
}

async function announce(yard: Yard, name: string, bytes: Buffer): Promise<Sent> {
  const metadata = { projectId: yard.projectId, filename: name, folder: "", lastModified: "1751449272000" };
  const created = await createUpload(yard.request, { metadata, length: bytes.length });
  expect(created.status(), await created.text()).toBe(201);
  return { name, bytes, location: created.headers().location ?? "" };
}

/** A PATCH under way. `status`: of its answer; null: the connection ended without one. */
interface Patch {
  send(bytes: Buffer): void;
  readonly status: Promise<number | null>;
}

function beginPatch(yard: Yard, { location, bytes }: Sent, offset: number): Patch {
  const request = httpRequest(`${product.address}${location}`, {
    method: "PATCH",
    agent: false,
    headers: {
      cookie: yard.cookie,
      "tus-resumable": "1.0.0",
      "upload-offset": String(offset),
      "content-type": "application/offset+octet-stream",
      "content-length": String(bytes.length - offset),
    },
  });
  const status = new Promise<number | null>((resolve) => {
    request.once("response", (response) => {
      response.resume();
      resolve(response.statusCode ?? null);
    });
    request.once("error", () => resolve(null));
    request.once("close", () => resolve(null));
  });
  request.flushHeaders();
  return { send: (part) => void request.write(part), status };
}

function originalOf({ location }: Sent): string {
  return path.join(storageDir, "originals", path.basename(location));
}

async function untilStored(sent: Sent, leastBytes: number): Promise<void> {
  const stored = async () => (await stat(originalOf(sent)).catch(() => null))?.size ?? 0;
  const untilMs = Date.now() + 30_000;
  // Without a pause: the moment is what counts.
  while ((await stored()) < leastBytes) if (Date.now() > untilMs) throw new Error(`${sent.name}: bytes do not arrive`);
}

async function countRecorded({ name }: Sent): Promise<number> {
  const database = createClient({ url: `file:${path.join(storageDir, "stackyard.db")}` });
  const { rows } = await database.execute({ sql: "select count(*) as n from files where name = ?", args: [name] });
  database.close();
  return Number(rows[0]?.n);
}

/** Goes on as tus 1.0.0 says: asks where the upload stands, and sends the rest, if any. */
async function resume(yard: Yard, sent: Sent, leastOffset: number): Promise<void> {
  const head = await inspectUpload(yard.request, sent.location);
  expect(head.status(), `${sent.name} is still there`).toBe(200);
  const offset = Number(head.headers()["upload-offset"]);
  expect(offset, `${sent.name}: bytes that were acknowledged`).toBeGreaterThanOrEqual(leastOffset);
  if (offset === sent.bytes.length) return;
  const patch = beginPatch(yard, sent, offset);
  patch.send(sent.bytes.subarray(offset));
  expect(await patch.status, sent.name).toBe(204);
}

async function open(playwright: { request: { newContext(o: { baseURL: string }): Promise<APIRequestContext> } }) {
  const person = inventPerson("Kit Lowe");
  await product.addAccount(person);
  product.start("web");
  product.start("worker");
  await product.untilHealthy();
  const request = await playwright.request.newContext({ baseURL: product.address });
  await signInByHttp(request, person);
  const { cookies } = await request.storageState();
  const cookie = cookies.map(({ name, value }) => `${name}=${value}`).join("; ");
  return { request, cookie, projectId: await makeProject(request, "Killed now and then") };
}

async function startWebAgain(): Promise<void> {
  product.start("web");
  await product.untilHealthy();
}

/** Everything is there once, byte for byte: on the disk, by the worker's checksum, and in the counts. */
async function expectAllThere(yard: Yard, all: readonly Sent[]): Promise<void> {
  expect(await waitUntilSorted(yard.request, yard.projectId)).toEqual({
    received: all.length,
    analysed: all.length,
    failed: 0,
    total: all.length,
    sorted: true,
  });
  const { files, uploads } = await (await yard.request.get(`/api/projects/${yard.projectId}/files`)).json();
  expect(uploads).toEqual([]);
  const sha256 = (bytes: Buffer) => createHash("sha256").update(bytes).digest("hex");
  const expected = all.map(({ name, bytes }) => ({ name, sha256: sha256(bytes), state: "analysed" }));
  const byName = (a: { name: string }, b: { name: string }) => (a.name < b.name ? -1 : 1);
  const listed = files.map(({ name, sha256: hash, state }: Record<string, string>) => ({ name, sha256: hash, state }));
  expect(listed.sort(byName)).toEqual(expected.sort(byName));
  for (const sent of all) expect((await readFile(originalOf(sent))).equals(sent.bytes), sent.name).toBe(true);
  expect(await readdir(path.join(storageDir, "originals"))).toHaveLength(all.length);
}

test("the web process killed at every moment of a last PATCH loses nothing and doubles nothing", async ({
  playwright,
}) => {
  test.setTimeout(420_000);
  const yard = await open(playwright);
  const all: Sent[] = [];
  const next = async () => {
    const sent = await announce(yard, `KILL${all.length + 1}.PNG`, await makePicture(all.length + 1));
    all.push(sent);
    return sent;
  };

  await test.step("with its head in and no byte", async () => {
    const sent = await next();
    const patch = beginPatch(yard, sent, 0);
    await delay(50);
    await product.kill("web");
    expect(await patch.status).toBeNull();
    await startWebAgain();
    await resume(yard, sent, 0);
  });

  await test.step("in the middle", async () => {
    const sent = await next();
    const half = Math.floor(sent.bytes.length / 2);
    const patch = beginPatch(yard, sent, 0);
    patch.send(sent.bytes.subarray(0, half));
    await untilStored(sent, 1);
    await product.kill("web");
    expect(await patch.status).toBeNull();
    expect(await countRecorded(sent)).toBe(0);
    await startWebAgain();
    await resume(yard, sent, 0);
  });

  await test.step("one byte before the end, the part before it acknowledged", async () => {
    const sent = await next();
    const most = sent.bytes.length - 100_000;
    const first = beginPatch(yard, { ...sent, bytes: sent.bytes.subarray(0, most) }, 0);
    first.send(sent.bytes.subarray(0, most));
    expect(await first.status).toBe(204);
    const last = beginPatch(yard, sent, most);
    last.send(sent.bytes.subarray(most, -1));
    await untilStored(sent, most + 1);
    await product.kill("web");
    expect(await last.status).toBeNull();
    await startWebAgain();
    await resume(yard, sent, most);
  });

  // Another process holds the database's write lock meanwhile: the bytes are in, and the record cannot be.
  const killBeforeRecord = async () => {
    const sent = await next();
    const database = createClient({ url: `file:${path.join(storageDir, "stackyard.db")}`, timeout: 20_000 });
    const lock = await database.transaction("write");
    const patch = beginPatch(yard, sent, 0);
    patch.send(sent.bytes);
    await untilStored(sent, sent.bytes.length);
    await product.kill("web");
    await lock.rollback();
    database.close();
    expect(await patch.status).toBeNull();
    expect(await countRecorded(sent)).toBe(0);
    return sent;
  };

  await test.step("between the last byte and its record; its client asks again", async () => {
    const sent = await killBeforeRecord();
    await startWebAgain();
    await resume(yard, sent, sent.bytes.length);
    expect(await countRecorded(sent)).toBe(1);
  });

  await test.step("the same, and no client ever asks again: a worker that starts records it", async () => {
    const sent = await killBeforeRecord();
    await product.kill("worker");
    product.start("worker");
    await startWebAgain();
    await expect.poll(() => countRecorded(sent), { timeout: 30_000 }).toBe(1);
  });

  await test.step("between the record and the answer, or right after it", async () => {
    const sent = await next();
    const patch = beginPatch(yard, sent, 0);
    patch.send(sent.bytes);
    while ((await countRecorded(sent)) === 0) await delay(1);
    await product.kill("web");
    expect([null, 204]).toContain(await patch.status);
    await startWebAgain();
    await resume(yard, sent, sent.bytes.length);
  });

  await test.step("whenever it happens to be, both processes", async () => {
    const random = makeRandom(41);
    for (let round = 0; round < 3; round++) {
      const three = [await next(), await next(), await next()];
      const patches = three.map((sent) => beginPatch(yard, sent, 0));
      for (const [i, sent] of three.entries()) patches[i]?.send(sent.bytes);
      await delay(random.between(0, 250));
      await Promise.all([product.kill("web"), product.kill("worker")]);
      const statuses = await Promise.all(patches.map(({ status }) => status));
      // What was acknowledged is recorded, whoever was killed.
      for (const [i, sent] of three.entries()) {
        if (statuses[i] === 204) expect(await countRecorded(sent), sent.name).toBe(1);
        else expect(statuses[i], sent.name).toBeNull();
      }
      product.start("worker");
      await startWebAgain();
      for (const [i, sent] of three.entries()) await resume(yard, sent, statuses[i] === 204 ? sent.bytes.length : 0);
    }
  });

  await expectAllThere(yard, all);
});

test("the worker killed while it measures and sorts measures everything once, and the board is the same", async ({
  playwright,
}) => {
  test.setTimeout(300_000);
  const yard = await open(playwright);
  const all: Sent[] = [];
  for (let i = 1; i <= 12; i++) {
    const sent = await announce(yard, `WORK${i}.PNG`, await makePicture(100 + i));
    all.push(sent);
    await resume(yard, sent, 0);
  }
  const random = makeRandom(42);
  for (let round = 0; round < 4; round++) {
    await delay(random.between(100, 900));
    await product.kill("worker");
    const { received, total } = await readProgress(yard.request, yard.projectId);
    expect([received, total]).toEqual([12, 12]);
    product.start("worker");
  }
  await expectAllThere(yard, all);
});
