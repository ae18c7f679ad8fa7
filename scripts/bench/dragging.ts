// node --import tsx --conditions=react-server scripts/bench/dragging.ts [--slower 4]
// How smoothly frames are dragged over the board, on the production build that is there (npm run build): frames drawn
// a second and interaction to next paint, on a processor slowed down in the browser. Figures, no verdict.
import { spawn, type ChildProcess } from "node:child_process";
import { mkdtempSync } from "node:fs";
import { rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { parseArgs } from "node:util";
import { chromium, type Page } from "@playwright/test";
import sharp from "sharp";
import type { Board } from "@/lib/board/model";
import { claimPort } from "../launch/port";

const storageDir = mkdtempSync(path.join(tmpdir(), "stackyard-dragging-"));
process.env.STORAGE_DIR = storageDir;
const port = String(await claimPort(0, "127.0.0.1"));
process.env.APP_URL = `http://127.0.0.1:${port}`;
// After the environment is set: these read it when they are loaded.
const { closeDatabase } = await import("@/db/client");
const { migrateDatabase } = await import("@/db/migrate");
const { createAccount } = await import("@/lib/people/writes");
const { newAccountSchema } = await import("@/lib/people/schema");
const { newProjectSchema } = await import("@/lib/projects/schema");
const { createProject } = await import("@/lib/projects/writes");
const { makeBoard } = await import("@/tests/support/make-board");
const { storeBoard } = await import("@/tests/support/stored-board");

const { values } = parseArgs({ options: { slower: { type: "string", default: "4" } } });
const PERSON = { name: "Alma Reed", email: "alma@yard.example", password: "twelve grey herons on a wall" };
const SIZES = [
  { rows: 3, columns: 6, framesPerTile: 6 },
  { rows: 14, columns: 12, framesPerTile: 12 },
  { rows: 14, columns: 36, framesPerTile: 4 },
];
/** A hand crosses the board in about two seconds, with a position every 16 ms. */
const MOVES = 240;
const MOVE_MS = 16;

await migrateDatabase();
const id = await createAccount(newAccountSchema.parse(PERSON));
const boards = [];
for (const [at, size] of SIZES.entries()) {
  const board = withIdsOfItsOwn(makeBoard(size), at);
  const projectId = await createProject({ id }, newProjectSchema.parse({ name: `${board.frames.length} frames` }));
  await storeBoard(projectId, { id, ...PERSON }, board);
  boards.push({ projectId, board });
}
await closeDatabase();
const server = startServer();
try {
  await waitUntilReady();
  const browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium",
    args: ["--no-sandbox", "--disable-gpu", "--no-first-run"],
  });
  process.stdout.write(
    "| frames | tiles | frames a second | longest frame | drop to paint | key to paint, worst |\n|---|---|---|---|---|---|\n",
  );
  for (const { projectId, board } of boards) {
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } });
    const figures = await measure(page, projectId);
    process.stdout.write(`| ${[board.frames.length, board.stacks.length, ...figures].join(" | ")} |\n`);
    await page.close();
  }
  await browser.close();
} finally {
  server.kill("SIGTERM");
  await rm(storageDir, { recursive: true, force: true });
}

/** Ids are unique in the database, not only in a project. */
function withIdsOfItsOwn(board: Board, at: number): Board {
  const text = JSON.stringify(board).replace(/"(frame|stack|file|question)-/g, `"b${at}-$1-`);
  return JSON.parse(text) as Board;
}

function startServer(): ChildProcess {
  return spawn(process.execPath, ["node_modules/next/dist/bin/next", "start", "-p", port, "-H", "127.0.0.1"], {
    env: { ...process.env, NODE_ENV: "production" },
    stdio: "ignore",
  });
}

async function waitUntilReady(): Promise<void> {
  for (let tries = 0; tries < 100; tries += 1) {
    const answer = await fetch(`${process.env.APP_URL}/api/health`).catch(() => null);
    if (answer) return;
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  throw new Error("the product did not start");
}

async function measure(page: Page, projectId: string): Promise<string[]> {
  await signIn(page);
  const picture = await sharp({ create: { width: 320, height: 213, channels: 3, background: "#8a7f6a" } })
    .jpeg()
    .toBuffer();
  await page.route(/\/frames\/[^/]+\/(thumbnail|preview|crop)/, (route) =>
    route.fulfill({ body: picture, contentType: "image/jpeg" }),
  );
  await page.goto(`${process.env.APP_URL}/projects/${projectId}/board?tile=A2`);
  const row = page.getByRole("region", { name: "Frames of A2" }).getByRole("row").first();
  await row.waitFor({ timeout: 120_000 });
  await page.waitForTimeout(2_000);
  const devTools = await page.context().newCDPSession(page);
  await devTools.send("Emulation.setCPUThrottlingRate", { rate: Number(values.slower) });
  // tsx keeps the names of functions with a helper that a page does not have.
  await page.evaluate("globalThis.__name = (named) => named");
  await page.evaluate(watch);

  const box = await row.boundingBox();
  if (!box) throw new Error("the bench is not open");
  await page.mouse.move(box.x + 50, box.y + 40);
  await page.mouse.down();
  await page.mouse.move(box.x + 60, box.y + 30, { steps: 2 });
  await page.evaluate(() => window.startFrames());
  for (let at = 0; at < MOVES; at += 1) {
    const began = performance.now();
    const angle = (at / MOVES) * Math.PI * 6;
    await page.mouse.move(800 + 420 * Math.cos(angle), 420 + 120 * Math.sin(angle * 1.7));
    const rest = MOVE_MS - (performance.now() - began);
    if (rest > 0) await page.waitForTimeout(rest);
  }
  const drawn = await page.evaluate(() => window.stopFrames());
  const a3 = await page.locator('[data-place="A3"]').boundingBox();
  if (a3) await page.mouse.move(a3.x + a3.width / 2, a3.y + a3.height / 2, { steps: 3 });
  const drop = await timed(page, () => page.mouse.up());

  await page.locator("[data-row]").first().focus();
  await page.locator("[data-handle][data-grip^=frame]").first().focus();
  const keys: number[] = [await timed(page, () => page.keyboard.press("Enter"))];
  for (const key of ["ArrowRight", "ArrowRight", "ArrowDown", "ArrowRight", "ArrowDown", "ArrowLeft"]) {
    keys.push(await timed(page, () => page.keyboard.press(key)));
  }
  await page.keyboard.press("Escape");
  return [
    drawn.framesASecond.toFixed(1),
    `${Math.round(drawn.longestMs)} ms`,
    `${Math.round(drop)} ms`,
    `${Math.round(Math.max(...keys))} ms`,
  ];
}

async function signIn(page: Page): Promise<void> {
  await page.goto(`${process.env.APP_URL}/sign-in`);
  await page.getByLabel("E-mail").fill(PERSON.email);
  await page.getByLabel("Password", { exact: true }).fill(PERSON.password);
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await page.waitForURL(/\/projects$/);
}

/** Interaction to next paint, ms: the longest of the interaction's events by the Event Timing API (W3C). */
async function timed(page: Page, act: () => Promise<unknown>): Promise<number> {
  await page.evaluate(() => window.takeEvents());
  await act();
  await page.waitForTimeout(900);
  return page.evaluate(() => window.takeEvents());
}

declare global {
  interface Window {
    startFrames: () => void;
    stopFrames: () => { framesASecond: number; longestMs: number };
    takeEvents: () => number;
  }
}

/** Runs in the page. */
function watch(): void {
  let isOn = false;
  let stamps: number[] = [];
  const tick = (now: number) => {
    stamps.push(now);
    if (isOn) requestAnimationFrame(tick);
  };
  window.startFrames = () => {
    isOn = true;
    stamps = [];
    requestAnimationFrame(tick);
  };
  window.stopFrames = () => {
    isOn = false;
    const gaps = stamps.slice(1).map((stamp, at) => stamp - (stamps[at] ?? stamp));
    const span = (stamps.at(-1) ?? 0) - (stamps[0] ?? 0);
    return { framesASecond: (1000 * gaps.length) / span, longestMs: Math.max(...gaps) };
  };
  let longest = 0;
  const observer = new PerformanceObserver((list) => {
    for (const entry of list.getEntries()) longest = Math.max(longest, entry.duration);
  });
  observer.observe({ type: "event", durationThreshold: 16 } as PerformanceObserverInit);
  window.takeEvents = () => {
    for (const entry of observer.takeRecords()) longest = Math.max(longest, entry.duration);
    const taken = longest;
    longest = 0;
    return taken;
  };
}
