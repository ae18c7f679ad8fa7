import path from "node:path";
import { expect, test } from "@playwright/test";
import { Yard } from "./support/yard";

let yard: Yard;

test.beforeEach(async () => {
  yard = await Yard.make();
});

test.afterEach(() => yard.clear());

test("launch is ready, answers, stops on SIGTERM and leaves no process behind", async () => {
  const product = await yard.launchUntilReady("--no-demo");
  const health = await fetch(`${product.address}/api/health`);
  expect(health.status).toBe(200);
  expect(await health.json()).toMatchObject({ status: "ok" });
  expect(product.output()).not.toContain("[demo]");

  const port = new URL(product.address).port;
  const second = yard.launch(["--no-demo"], { PORT: port });
  expect(await second.ended).toBe(1);
  expect(second.output()).toContain(`Port ${port} on 127.0.0.1 is already in use.`);

  // npm passes it on and waits: nothing is left when it has ended.
  product.child.kill("SIGTERM");
  await product.ended;
  expect(await yard.listProcesses()).toEqual([]);
  expect(product.output()).toContain("Stopping.");
  await expect(fetch(`${product.address}/api/health`)).rejects.toThrow();
});

test("a worker and a web process that are killed are started again; both end with the launching process", async () => {
  const product = await yard.launchUntilReady("--no-demo");
  // Next gives its process a name of its own.
  for (const part of ["worker.ts", "next-server"]) {
    const before = await yard.killProcess(part);
    const now = async () => (await yard.findProcess(part)) ?? before;
    await expect.poll(now, { timeout: 30_000, message: `${part} is started again` }).not.toBe(before);
  }
  const health = async () => (await fetch(`${product.address}/api/health`).catch(() => null))?.status;
  await expect.poll(health, { timeout: 30_000 }).toBe(200);

  await yard.killProcess("node scripts/launch.mjs");
  await expect.poll(() => yard.listProcesses(), { timeout: 30_000 }).toEqual([]);
});

test("npm killed outright leaves nothing behind either", async () => {
  const product = await yard.launchUntilReady("--no-demo");
  product.child.kill("SIGKILL");
  await expect.poll(() => yard.listProcesses(), { timeout: 30_000 }).toEqual([]);
});

test("an unknown option and a storage folder that cannot be written are one clear line each", async () => {
  const unknown = yard.launch(["--everything"]);
  expect(await unknown.ended).toBe(1);
  expect(unknown.output()).toContain("Unknown option: --everything");
  const inFile = path.resolve("package.json", "storage");
  const unwritable = yard.launch(["--no-demo"], { STORAGE_DIR: inFile });
  expect(await unwritable.ended).toBe(1);
  expect(unwritable.output()).toContain(`Cannot write to the storage folder ${inFile} (STORAGE_DIR).`);
});
