import { createHash } from "node:crypto";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, afterEach, beforeAll, beforeEach, expect, test, vi } from "vitest";
import { eq } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, signInAs } from "../support/people";
import { generateShoot } from "../support/shoots/generate-shoot";
import type { ShootTruth } from "../support/shoots/shoot-truth";
import { hasShared, listShared } from "../support/shared-data";
import { uploadFile } from "../support/uploads";
import { WorkerProcess, watchProgress } from "../support/worker-process";
import { GET as getCsv } from "@/app/api/projects/[projectId]/manifest.csv/route";
import { GET as getManifest } from "@/app/api/projects/[projectId]/manifest/route";
import { database } from "@/db/client";
import { jobs, workers } from "@/db/schema/jobs";
import { accessForJob } from "@/lib/auth/gate";
import { getBoard } from "@/lib/board/reads";
import type { Board } from "@/lib/board/model";
import { listIntakeFiles } from "@/lib/frames/reads";
import type { ProjectId } from "@/lib/ids";
import { getHealth } from "@/lib/jobs/health";

// The worker as it really runs: its own process, its own pool of readers, killed and stopped as processes are.
const storageDir = useDatabase();
// Each test waits for processes that share the machine with all other tests.
vi.setConfig({ testTimeout: 180_000 });
let shootDir = "";
let shoot: ShootTruth;
let projectId: ProjectId;
let worker: WorkerProcess | null = null;

beforeAll(async () => {
  shootDir = mkdtempSync(path.join(tmpdir(), "stackyard-shoot-"));
  shoot = await generateShoot("single-row", 5, shootDir, { widthPx: 750, heightPx: 500 });
}, 120_000);
afterAll(() => rmSync(shootDir, { recursive: true }));

beforeEach(async () => {
  const lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead, "Harbour wall");
  await signInAs(lead);
});
afterEach(async () => {
  await worker?.end("SIGKILL");
  worker = null;
});

const start = () => (worker = new WorkerProcess(storageDir));
const board = () => getBoard(accessForJob({ projectId }));
const files = () => listIntakeFiles(accessForJob({ projectId }));
const sha256 = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");
const read = (file: string) => readFileSync(path.join(shootDir, file));

/** Brings files of the shoot in, as a browser does: name and folder apart. @returns upload id by file */
async function bringIn(names: readonly string[]): Promise<Map<string, string>> {
  const ids = new Map<string, string>();
  for (const file of names) {
    ids.set(file, await uploadFile(projectId, path.basename(file), read(file), path.dirname(file)));
  }
  return ids;
}

/** Names of the frames in each stack, in one fixed order. */
function stacksOf({ stacks, frames }: Board): string[][] {
  return stacks
    .map(({ id }) => frames.filter(({ stackId }) => stackId === id).map(({ name }) => name))
    .map((names) => names.sort())
    .sort((a, b) => String(a[0]).localeCompare(String(b[0])));
}

const truthOf = (truth: ShootTruth) =>
  truth.stacks
    .map(({ files: names }) => names.map((file) => path.parse(file).name).sort())
    .sort((a, b) => String(a[0]).localeCompare(String(b[0])));

test("a shoot is sorted although the worker is killed in the middle, and every original is what was sent", async () => {
  const names = shoot.frames.map(({ file }) => file);
  start();
  const ids = await bringIn(names);
  await watchProgress(projectId, ({ analysed }) => analysed >= 5);
  await worker?.end("SIGKILL");
  start();
  const end = await watchProgress(projectId, ({ sorted }) => sorted);
  expect(end).toEqual({ received: names.length, analysed: names.length, failed: 0, total: names.length, sorted: true });

  for (const [file, id] of ids) {
    expect(sha256(readFileSync(path.join(storageDir, "originals", id)))).toBe(sha256(read(file)));
  }
  const sorted = await board();
  expect(stacksOf(sorted)).toEqual(truthOf(shoot));
  expect([sorted.grid.rows, sorted.grid.columns]).toEqual([shoot.rows, shoot.columns]);
  // Frames as the camera counted them, and hashes of what was sent: the manifest says the same as the board.
  const context = { params: Promise.resolve({ projectId }) };
  const manifest = await (await getManifest(new Request("http://localhost/?download=1"), context)).json();
  const hashes = new Set(names.map((file) => sha256(read(file))));
  expect(new Set(manifest.frames.map((frame: { files: { sha256: string }[] }) => frame.files[0]?.sha256))).toEqual(
    hashes,
  );
  const csv = await (await getCsv(new Request("http://localhost/"), context)).text();
  expect(csv.trimEnd().split("\r\n")).toHaveLength(names.length + 1);
  expect(await getHealth(Date.now())).toMatchObject({ status: "ok", failing: [] });
});

test("frames that come later join or found stacks, and move nothing else", async () => {
  start();
  const [first, second, ...later] = shoot.stacks;
  if (!first || !second) throw new Error("the shoot is too small");
  // All of one tile and half of the next, as when a card is read in two goes.
  await bringIn([...first.files, ...second.files.slice(0, 3)]);
  await watchProgress(projectId, ({ sorted }) => sorted);
  const before = await board();
  await bringIn([...second.files.slice(3), ...later.flatMap(({ files: names }) => names)]);
  await watchProgress(projectId, ({ sorted, received }) => sorted && received === shoot.frames.length);
  const after = await board();
  expect(after.revision).toBeGreaterThan(before.revision);
  const stackOf = new Map(after.frames.map(({ id, stackId }) => [id, stackId]));
  for (const frame of before.frames) expect(stackOf.get(frame.id)).toBe(frame.stackId);
  expect(stacksOf(after)).toEqual(truthOf(shoot));
  const columns = new Map(after.stacks.map(({ id, column }) => [id, column ?? 0]));
  const [a, b] = before.stacks;
  expect((columns.get(b?.id ?? "") ?? 0) - (columns.get(a?.id ?? "") ?? 0)).toBe((b?.column ?? 0) - (a?.column ?? 0));
});

test("asked to stop, the worker stops at once and gives its work back untried", async () => {
  start();
  await bringIn(shoot.frames.slice(0, 12).map(({ file }) => file));
  await watchProgress(projectId, ({ analysed }) => analysed >= 1);
  const askedAtMs = Date.now();
  expect(await worker?.end("SIGTERM")).toBe(0);
  expect(Date.now() - askedAtMs).toBeLessThan(5_000);
  expect(await database().select({ id: jobs.id }).from(jobs).where(eq(jobs.state, "running"))).toEqual([]);
  expect(await database().select({ id: workers.id }).from(workers)).toEqual([]);
  expect(await getHealth(Date.now())).toMatchObject({ status: "failing", failing: ["worker"], database: "ok" });
  const waiting = await database().select({ attempts: jobs.attempts }).from(jobs).where(eq(jobs.state, "waiting"));
  expect(waiting.every(({ attempts }) => attempts === 0)).toBe(true);
  start();
  await watchProgress(projectId, ({ sorted }) => sorted);
});

test("the same file twice, raw files beside and alone, and what is no picture: each is listed for what it is", async () => {
  const [one, two] = shoot.frames;
  if (!one || !two) throw new Error("the shoot is too small");
  const raw = Buffer.from("raw bytes of nobody's camera");
  await uploadFile(projectId, "HARB0001.JPG", read(one.file));
  await uploadFile(projectId, "copy.JPG", read(one.file), "again");
  await uploadFile(projectId, "HARB0001.NEF", raw);
  await uploadFile(projectId, "HARB0002.CR2", Buffer.concat([raw, raw]));
  await uploadFile(projectId, "alone.NEF", raw);
  await uploadFile(projectId, "empty.jpg", Buffer.alloc(0));
  await uploadFile(projectId, "notes.jpg", Buffer.from("text, not a picture"));
  await uploadFile(projectId, "cut.jpg", read(two.file).subarray(0, 20_000));
  await uploadFile(projectId, "list.txt", Buffer.from("shopping"));
  start();
  const end = await watchProgress(projectId, ({ sorted }) => sorted);
  // The raw file alone counts as unreadable, as in the manifest (interfaces.md: failed).
  expect(end).toEqual({ received: 9, analysed: 4, failed: 5, total: 9, sorted: true });
  const byName = new Map((await files()).map((file) => [file.name, file]));
  expect(byName.get("copy.JPG")).toMatchObject({ state: "duplicate", duplicateOf: { name: "HARB0001.JPG" } });
  expect(byName.get("HARB0001.NEF")?.frameId).toBe(byName.get("HARB0001.JPG")?.frameId);
  expect(byName.get("alone.NEF")).toMatchObject({ state: "duplicate" });
  expect(byName.get("HARB0002.CR2")).toMatchObject({ state: "analysed", reason: expect.stringContaining("raw file") });
  for (const name of ["empty.jpg", "notes.jpg", "cut.jpg", "list.txt"]) {
    expect(byName.get(name)).toMatchObject({ state: "failed", frameId: null, reason: expect.stringMatching(/\w+\.$/) });
  }
  const { frames, unreadable, duplicates } = await board();
  expect(frames.map(({ name, files: own }) => [name, own.map((file) => file.name)])).toEqual([
    ["HARB0001", ["HARB0001.JPG", "HARB0001.NEF"]],
  ]);
  expect(unreadable.map(({ name }) => name).sort()).toEqual([
    "HARB0002.CR2",
    "cut.jpg",
    "empty.jpg",
    "list.txt",
    "notes.jpg",
  ]);
  expect(duplicates).toContainEqual({ name: "copy.JPG", folder: "again", of: frames[0]?.id });
});

// Files of python-pillow's and image-rs's test suites (shared data, README.md there): made to crash decoders.
test.skipIf(!hasShared("broken"))("pictures made to crash readers stop nothing", { timeout: 300_000 }, async () => {
  const [good] = shoot.frames;
  if (!good) throw new Error("the shoot is too small");
  const broken = listShared("broken");
  for (const file of broken) await uploadFile(projectId, path.basename(file), readFileSync(file));
  await bringIn([good.file]);
  start();
  const end = await watchProgress(projectId, ({ sorted }) => sorted, 280_000);
  expect(end.received).toBe(broken.length + 1);
  for (const file of await files()) {
    const isTold = file.state === "analysed" || file.state === "duplicate" || (file.reason ?? "").length > 10;
    expect(isTold, `${file.name}: ${file.state} ${file.reason}`).toBe(true);
  }
  expect((await board()).frames.map(({ name }) => name)).toContain(path.parse(good.file).name);
});
