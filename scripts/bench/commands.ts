import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm } from "node:fs/promises";
import http from "node:http";
import { tmpdir } from "node:os";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";

import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { signIn, type HttpSession } from "@/lib/demo/http-session";
import { claimPort } from "@/scripts/launch/port";
import { makeBoard } from "@/tests/support/make-board";

/** Editors at once: one, and as many as the client named. */
const EDITORS = [1, 20];
const COMMANDS_ONE = 200;
const COMMANDS_EACH = 25;
const BOARDS = [
  { rows: 3, columns: 6, framesPerTile: 6 },
  { rows: 20, columns: 20, framesPerTile: 5 },
  { rows: 30, columns: 40, framesPerTile: 5 },
];
/** The largest board is measured for its size only. */
const COMMANDED_BOARDS = 2;
const PASSWORD = "harbour lantern violet spoon";

/**
 * Round trips of commands over HTTP on the production build, and the size of the board's answer. Needs `npm run build`.
 * @returns rows of a table
 */
export async function measureCommands(): Promise<string[][]> {
  const storageDir = await mkdtemp(path.join(tmpdir(), "stackyard-bench-"));
  process.env.STORAGE_DIR = storageDir;
  const port = await claimPort(0, "127.0.0.1");
  const address = `http://127.0.0.1:${port}`;
  process.env.APP_URL = address;
  const setUp = await import("./command-projects");
  const { emails, projects } = await setUp.makeProjects(BOARDS.map(makeBoard), Math.max(...EDITORS), PASSWORD);
  const server = startServer(port, storageDir);
  try {
    await untilReady(address);
    const sessions: HttpSession[] = [];
    for (const email of emails) sessions.push(await signIn(address, { email, password: PASSWORD }));
    const [first] = sessions;
    if (!first) throw new Error("nobody is signed in");
    const rows: string[][] = [];
    for (const { id, board } of projects) rows.push(await measureSize(first, id, board));
    rows.push(await measureLeast(first, projects[0]?.id ?? ""));
    for (const project of projects.slice(0, COMMANDED_BOARDS)) {
      for (const editors of EDITORS) rows.push(await measureEditors(sessions.slice(0, editors), project));
    }
    return rows;
  } finally {
    server.kill();
    await once(server, "exit");
    await setUp.close();
    await rm(storageDir, { recursive: true });
  }
}

function startServer(port: number, storageDir: string): ChildProcess {
  const next = path.resolve("node_modules/next/dist/bin/next");
  return spawn(process.execPath, [next, "start", "-p", String(port), "-H", "127.0.0.1"], {
    env: { ...process.env, NODE_ENV: "production", NODE_OPTIONS: "", STORAGE_DIR: storageDir },
    stdio: ["ignore", "ignore", "inherit"],
  });
}

async function untilReady(address: string): Promise<void> {
  for (let tries = 0; tries < 100; tries += 1) {
    // 503 is an answer: no worker runs here.
    const response = await fetch(`${address}/api/health`).catch(() => null);
    if (response) return;
    await delay(200);
  }
  throw new Error("the product did not start; is it built (npm run build)?");
}

interface Project {
  readonly id: string;
  readonly board: Board;
}

async function measureEditors(sessions: readonly HttpSession[], { id, board }: Project): Promise<string[]> {
  const each = sessions.length === 1 ? COMMANDS_ONE : COMMANDS_EACH;
  // The first command of a process reads the board; that is measured by itself.
  if (sessions[0]) await timeCommand(sessions[0], id, { type: "set-aside", frameIds: [board.frames[0]?.id ?? ""] });
  const times = await Promise.all(
    sessions.map(async (session, editor) => {
      const own: number[] = [];
      for (let at = 0; at < each; at += 1) own.push(await timeCommand(session, id, nextCommand(board, editor, at)));
      return own;
    }),
  );
  const what = `${board.frames.length} frames, ${sessions.length} at once, ${times.flat().length} commands`;
  return [what, quantiles(times.flat())];
}

function quantiles(timesMs: readonly number[]): string {
  const sorted = [...timesMs].sort((a, b) => a - b);
  const at = (part: number) => `${(sorted[Math.floor(sorted.length * part)] ?? 0).toFixed(1)} ms`;
  return `p50 ${at(0.5)}, p95 ${at(0.95)}, p99 ${at(0.99)}`;
}

/** The same way there and back with the gate and two small reads: what of a command's time is not the command. */
async function measureLeast({ address, cookie }: HttpSession, projectId: string): Promise<string[]> {
  const times: number[] = [];
  for (let at = 0; at < COMMANDS_ONE; at += 1) {
    const startMs = performance.now();
    await (await fetch(`${address}/api/projects/${projectId}/board?since=0`, { headers: { cookie } })).text();
    times.push(performance.now() - startMs);
  }
  return ["for comparison: asking whether anything has changed", quantiles(times)];
}

/** Moves, set aside and brought back by turns, on frames of the editor's own: none is refused. */
function nextCommand(board: Board, editor: number, at: number): CommandDraft {
  const share = Math.floor(board.frames.length / Math.max(...EDITORS));
  const frame = board.frames[editor * share + (at % share)];
  const stack = board.stacks[(at * 7 + editor * 3) % board.stacks.length];
  const frameIds = [frame?.id ?? ""];
  const turn = at % 3;
  if (turn === 1) return { type: "set-aside", frameIds };
  if (turn === 2) return { type: "bring-back", frameIds };
  // A stack that lost its last frame is gone; a place can always be given.
  const place = { row: stack?.row ?? 1, column: stack?.column ?? 1 };
  return { type: "move-frames", frameIds, to: { kind: "new-stack", stackId: crypto.randomUUID(), place } };
}

async function timeCommand({ address, cookie }: HttpSession, projectId: string, draft: CommandDraft): Promise<number> {
  const startMs = performance.now();
  const response = await fetch(`${address}/api/projects/${projectId}/commands`, {
    method: "POST",
    headers: { cookie, "content-type": "application/json" },
    body: JSON.stringify({ id: crypto.randomUUID(), revision: 0, ...draft }),
  });
  const text = await response.text();
  if (response.status !== 200) throw new Error(`a command was refused (${response.status}): ${text}`);
  return performance.now() - startMs;
}

async function measureSize(session: HttpSession, projectId: string, board: Board): Promise<string[]> {
  const url = `${session.address}/api/projects/${projectId}/board`;
  const startMs = performance.now();
  const plain = await countBytes(url, session.cookie, "identity");
  const elapsedMs = performance.now() - startMs;
  const packed = await countBytes(url, session.cookie, "gzip");
  const kB = (bytes: number) => `${(bytes / 1000).toFixed(0)} kB`;
  const what = `board of ${board.frames.length} frames, ${board.stacks.length} stacks`;
  return [what, `${kB(plain)} plain, ${kB(packed)} gzip, answered in ${elapsedMs.toFixed(0)} ms`];
}

/** As it comes over the wire: `fetch` would unpack it. */
function countBytes(url: string, cookie: string, encoding: string): Promise<number> {
  return new Promise((resolve, reject) => {
    const request = http.get(url, { headers: { cookie, "accept-encoding": encoding } }, (response) => {
      let bytes = 0;
      response.on("data", (chunk: Buffer) => (bytes += chunk.length));
      response.on("end", () => resolve(bytes));
    });
    request.on("error", reject);
  });
}
