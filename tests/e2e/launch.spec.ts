import { spawn, type ChildProcess } from "node:child_process";
import { mkdtemp, readdir, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { expect, test } from "@playwright/test";
import { claimPort } from "@/scripts/launch/port";

interface Launched {
  readonly child: ChildProcess;
  readonly address: string;
  /** Everything said so far. */
  output(): string;
  /** Its exit code, once it ended. */
  readonly ended: Promise<number | null>;
}

let storageDir = "";
const launched: Launched[] = [];

test.beforeEach(async () => {
  storageDir = await mkdtemp(path.join(tmpdir(), "stackyard-launch-"));
});

test.afterEach(async () => {
  for (const id of await listProcesses()) process.kill(id, "SIGKILL");
  await Promise.all(launched.splice(0).map(({ ended }) => ended));
  await rm(storageDir, { recursive: true, force: true });
});

/** As a person types it, npm included. */
async function launchByNpm(port: number, option: string, env: Record<string, string> = {}): Promise<Launched> {
  const child = spawn("npm", ["run", "launch", "--", option], {
    env: { ...process.env, PORT: String(port), HOST: "127.0.0.1", STORAGE_DIR: storageDir, ...env },
    stdio: ["ignore", "pipe", "pipe"],
  });
  let text = "";
  child.stdout.on("data", (chunk) => (text += chunk));
  child.stderr.on("data", (chunk) => (text += chunk));
  const ended = new Promise<number | null>((resolve) => child.once("exit", resolve));
  const result = { child, address: `http://127.0.0.1:${port}`, output: () => text, ended };
  launched.push(result);
  return result;
}

async function waitForReady({ address, output }: Launched): Promise<void> {
  await expect.poll(() => output().split("\n"), { timeout: 90_000, intervals: [100] }).toContain(`Ready: ${address}`);
}

/** Ids of the processes that were given this test's storage folder: launch, web, worker and its children. */
async function listProcesses(): Promise<number[]> {
  const ids = (await readdir("/proc")).filter((name) => /^\d+$/.test(name));
  const found = await Promise.all(
    ids.map(async (id) => {
      const environment = await readFile(`/proc/${id}/environ`, "utf8").catch(() => "");
      return environment.split("\0").includes(`STORAGE_DIR=${storageDir}`) ? [Number(id)] : [];
    }),
  );
  return found.flat();
}

/** @param part of its command line */
async function findProcess(part: string): Promise<number | undefined> {
  for (const id of await listProcesses()) {
    const commandLine = await readFile(`/proc/${id}/cmdline`, "utf8").catch(() => "");
    if (commandLine.split("\0").join(" ").includes(part)) return id;
  }
  return undefined;
}

async function killProcess(part: string, signal: NodeJS.Signals): Promise<number> {
  const id = await findProcess(part);
  if (id === undefined) throw new Error(`no process runs ${part}`);
  process.kill(id, signal);
  return id;
}

test("launch is ready, answers, stops on SIGTERM with 0 and leaves no process behind", async () => {
  const port = await claimPort(0, "127.0.0.1");
  const product = await launchByNpm(port, "--no-demo");
  await waitForReady(product);
  const health = await fetch(`${product.address}/api/health`);
  expect(health.status).toBe(200);
  expect(await health.json()).toMatchObject({ status: "ok" });
  expect(product.output()).not.toContain("[demo]");

  const second = await launchByNpm(port, "--no-demo");
  expect(await second.ended).toBe(1);
  expect(second.output()).toContain(`Port ${port} on 127.0.0.1 is already in use.`);

  // npm passes it on and waits: nothing is left when it has ended.
  product.child.kill("SIGTERM");
  await product.ended;
  expect(await listProcesses()).toEqual([]);
  expect(product.output().trimEnd().split("\n").at(-1)).toBe("Stopping.");
  await expect(fetch(`${product.address}/api/health`)).rejects.toThrow();
});

test("a worker and a web process that are killed are started again, and the launching process's end ends both", async () => {
  const product = await launchByNpm(await claimPort(0, "127.0.0.1"), "--no-demo");
  await waitForReady(product);
  // Next gives its process a name of its own.
  for (const part of ["worker.ts", "next-server"]) {
    const before = await killProcess(part, "SIGKILL");
    await expect
      .poll(async () => (await findProcess(part)) ?? before, { timeout: 30_000, message: `${part} is started again` })
      .not.toBe(before);
  }
  const health = () =>
    fetch(`${product.address}/api/health`).then(
      ({ status }) => status,
      () => 0,
    );
  await expect.poll(health, { timeout: 30_000 }).toBe(200);

  await killProcess("node scripts/launch.mjs", "SIGKILL");
  await expect.poll(listProcesses, { timeout: 30_000 }).toEqual([]);
});

test("npm killed outright leaves nothing behind either", async () => {
  const product = await launchByNpm(await claimPort(0, "127.0.0.1"), "--no-demo");
  await waitForReady(product);
  product.child.kill("SIGKILL");
  await expect.poll(listProcesses, { timeout: 30_000 }).toEqual([]);
});

test("an unknown option and a storage folder that cannot be written are one clear line each", async () => {
  const unknown = await launchByNpm(0, "--everything");
  expect(await unknown.ended).toBe(1);
  expect(unknown.output()).toContain("Unknown option: --everything");
  const inFile = path.join(process.cwd(), "package.json", "storage");
  const unwritable = await launchByNpm(0, "--no-demo", { STORAGE_DIR: inFile });
  expect(await unwritable.ended).toBe(1);
  expect(unwritable.output()).toContain(`Cannot write to the storage folder ${inFile} (STORAGE_DIR).`);
});
