import { execFile } from "node:child_process";
import { createHash } from "node:crypto";
import { readdir, readFile, rm } from "node:fs/promises";
import path from "node:path";
import { promisify } from "node:util";
import { expect, test, type APIRequestContext, type PlaywrightWorkerArgs } from "@playwright/test";
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from "@/lib/demo/accounts";
import { getManifest } from "./support/manifest";
import { signInByHttp } from "./support/people";
import { readProgress } from "./support/uploads";
import { Yard } from "./support/yard";

const run = promisify(execFile);

let yard: Yard;

test.beforeEach(async () => {
  yard = await Yard.make();
});

test.afterEach(async () => {
  await yard.clear();
  await rm(`${yard.storageDir}-copy`, { recursive: true, force: true });
});

interface DemoView {
  readonly request: APIRequestContext;
  readonly projectId: string;
}

/** The demo as one of its people sees it. */
async function openDemo(
  playwright: PlaywrightWorkerArgs["playwright"],
  baseURL: string,
  role: string,
): Promise<DemoView> {
  const request = await playwright.request.newContext({ baseURL });
  const { email = "", name = "" } = DEMO_ACCOUNTS.find((account) => account.role === role) ?? {};
  await signInByHttp(request, { email, name, password: DEMO_PASSWORD });
  const { projects } = await (await request.get("/api/projects")).json();
  expect(projects).toHaveLength(1);
  expect(projects[0]).toMatchObject({ role, isDemo: true });
  return { request, projectId: projects[0].id };
}

async function hashFiles(folder: string): Promise<string[]> {
  const names = await readdir(folder);
  const hashes = names.map(async (name) => {
    const bytes = await readFile(path.join(folder, name));
    return createHash("sha256").update(bytes).digest("hex");
  });
  return (await Promise.all(hashes)).sort();
}

test("a demo cut short is completed by the next launch, survives backup and restore, and is taken away whole", async ({
  playwright,
}) => {
  test.setTimeout(600_000);
  const first = await yard.launchUntilReady();
  await expect.poll(first.output, { timeout: 240_000 }).toContain("27 of 108 frames brought in");
  first.child.kill("SIGTERM");
  await first.ended;
  expect(await yard.listProcesses()).toEqual([]);

  const second = await yard.launchUntilReady();
  await expect.poll(second.output, { timeout: 240_000 }).toContain("[demo] sorted.");
  const demo = await openDemo(playwright, second.address, "lead");
  expect(await readProgress(demo.request, demo.projectId)).toEqual({
    received: 108,
    analysed: 108,
    failed: 0,
    total: 108,
    sorted: true,
  });
  for (const { role } of DEMO_ACCOUNTS) await openDemo(playwright, second.address, role);
  const { createdAt: _, ...manifest } = await getManifest(demo.request, demo.projectId);
  expect(manifest.frames).toHaveLength(108);
  expect([manifest.grid.rows, manifest.grid.columns, manifest.grid.holes]).toEqual([3, 6, ["B5"]]);
  const hashes = manifest.frames.flatMap(({ files }) => files.map(({ sha256 }) => sha256)).sort();
  expect(await hashFiles(path.join(yard.storageDir, "originals"))).toEqual(hashes);

  // Backup while it runs; the copy, launched, is the same product with the same people.
  const copyDir = `${yard.storageDir}-copy`;
  await run("npm", ["run", "--silent", "backup", "--", copyDir], {
    env: { ...process.env, STORAGE_DIR: yard.storageDir },
  });
  expect(await hashFiles(path.join(copyDir, "originals"))).toEqual(hashes);
  second.child.kill("SIGTERM");
  await second.ended;
  await rm(yard.storageDir, { recursive: true });
  await run("cp", ["-a", copyDir, yard.storageDir]);
  const third = await yard.launchUntilReady();
  const restored = await openDemo(playwright, third.address, "editor");
  const { createdAt: __, ...same } = await getManifest(restored.request, restored.projectId);
  expect(same).toEqual(manifest);

  // Taken away beside the running product.
  const removal = yard.launch(["--remove-demo"]);
  expect(await removal.ended, removal.output()).toBe(0);
  expect(removal.output()).toMatch(/The demo is gone: 3 accounts/);
  expect((await restored.request.get("/api/projects")).status()).toBe(401);
  await expect.poll(() => readdir(path.join(yard.storageDir, "originals")), { timeout: 90_000 }).toEqual([]);
  third.child.kill("SIGTERM");
  await third.ended;

  const fourth = await yard.launchUntilReady();
  await fetch(`${fourth.address}/sign-in`);
  expect(fourth.output()).not.toContain("frames brought in");
  expect(fourth.output()).not.toContain(DEMO_PASSWORD);
});
