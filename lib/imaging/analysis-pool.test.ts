import { fork } from "node:child_process";
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import sharp from "sharp";
import { afterEach, describe, expect, test } from "vitest";

import { createAnalysisPool, type AnalysisPool } from "@/lib/imaging/analysis-pool";

const MISBEHAVING = fileURLToPath(new URL("../../tests/support/misbehaving-child.ts", import.meta.url));
const task = (path: string) => ({ path, previewPath: null, thumbnailPath: null, registrationPath: null });

let pool: AnalysisPool | null = null;
afterEach(() => pool?.close());

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch {
    return false;
  }
}

describe("a pool of children that misbehave", () => {
  const open = (size: number, longestSeconds = 20) => {
    pool = createAnalysisPool({ size, longestSeconds, childPath: MISBEHAVING });
    return pool;
  };

  test.each([
    ["crash", "crashed"],
    ["exhaust", "crashed"],
  ])("a picture that makes its child %s fails alone", async (what, code) => {
    const { analyse } = bind(open(1));
    const results = await Promise.allSettled([analyse("before"), analyse(what), analyse("after")]);
    expect(results.map((result) => result.status)).toEqual(["fulfilled", "rejected", "fulfilled"]);
    expect(results[1]).toMatchObject({ reason: { name: "PictureError", code } });
  });

  test("a picture whose child is killed from outside is read by another", async () => {
    const { analyse } = bind(open(1));
    const { sha256: pid } = await analyse("first");
    const slow = analyse("slow");
    setTimeout(() => process.kill(Number(pid), "SIGKILL"), 200);
    const { sha256: other } = await slow;
    expect(other).not.toBe(pid);
  });

  test("a picture that hangs is stopped after its time and the next one read", async () => {
    const { analyse } = bind(open(1, 1));
    const results = await Promise.allSettled([analyse("hang"), analyse("after")]);
    expect(results[0]).toMatchObject({ reason: { code: "timeout" } });
    expect(results[1]?.status).toBe("fulfilled");
  });

  test("a signal stops the picture under way and the waiting one, and nothing else", async () => {
    const { analyse } = bind(open(1));
    const controller = new AbortController();
    const under = analyse("hang", controller.signal);
    const waiting = analyse("waiting", controller.signal);
    const other = analyse("other");
    setTimeout(() => controller.abort(), 1500);
    await expect(under).rejects.toMatchObject({ name: "AbortError" });
    await expect(waiting).rejects.toMatchObject({ name: "AbortError" });
    await expect(other).resolves.toMatchObject({ bytes: 1 });
    await expect(analyse("late", controller.signal)).rejects.toMatchObject({ name: "AbortError" });
  });

  test("closing stops everything at once and leaves no process", async () => {
    const opened = open(2);
    const { analyse } = bind(opened);
    const { sha256: pid } = await analyse("first");
    const under = analyse("hang");
    const rejected = expect(under).rejects.toMatchObject({ name: "AbortError" });
    await opened.close();
    await rejected;
    expect(isRunning(Number(pid))).toBe(false);
    await expect(analyse("afterwards")).rejects.toMatchObject({ name: "AbortError" });
  });

  test("a program that does not start fails the pictures instead of keeping them waiting", async () => {
    pool = createAnalysisPool({ size: 1, childPath: "/nowhere/at-all.ts" });
    await expect(pool.analyse(task("a"))).rejects.toThrow("does not start");
  });
});

describe("the pool with its own children", () => {
  test("reads pictures, refuses others with their reason, and reports what is nobody's fault", async () => {
    const folder = await mkdtemp(join(tmpdir(), "stackyard-pool-"));
    const good = join(folder, "good.png");
    const bad = join(folder, "bad.jpg");
    await sharp({ create: { width: 60, height: 40, channels: 3, background: "#336699" } })
      .png()
      .toFile(good);
    await writeFile(bad, "not a picture");
    pool = createAnalysisPool({ size: 2 });
    const results = await Promise.allSettled(
      [good, bad, join(folder, "gone.jpg")].map((path) => pool?.analyse(task(path))),
    );
    expect(results).toMatchObject([
      { value: { mediaType: "image/png", measurements: { widthPx: 60, meanBrightness: 0x66 } } },
      { reason: { name: "PictureError", code: "not-a-picture", file: { bytes: 13 } } },
      { reason: { name: "Error", message: expect.stringContaining("ENOENT") as string } },
    ]);
    await rm(folder, { recursive: true });
  });

  test("children end when their parent is killed", async () => {
    const parent = fork(fileURLToPath(new URL("../../tests/support/pool-parent.ts", import.meta.url)), {
      execArgv: ["--import", "tsx"],
    });
    const child = await new Promise<number>((resolve) => parent.once("message", (pid) => resolve(Number(pid))));
    expect(isRunning(child)).toBe(true);
    parent.kill("SIGKILL");
    await expect.poll(() => isRunning(child), { timeout: 10_000 }).toBe(false);
  });
});

function bind(opened: AnalysisPool) {
  return { analyse: (path: string, signal?: AbortSignal) => opened.analyse(task(path), signal) };
}
