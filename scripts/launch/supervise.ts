import { spawn, type ChildProcess } from "node:child_process";
import path from "node:path";
import { createInterface } from "node:readline";

/** A program that is kept running. */
export interface Supervised {
  /** Asks the program to stop, and waits until it has. */
  stop(): Promise<void>;
}

interface ProgramOptions {
  /** For people: stands before each of its lines. */
  readonly name: string;
  /** Arguments of Node.js. */
  readonly args: readonly string[];
  readonly env: NodeJS.ProcessEnv;
}

interface SuperviseOptions extends ProgramOptions {
  /** Called once where the program dies so often that starting it again is no help. */
  readonly onGivenUp: (reason: string) => void;
}

/** Dying this often within the window means that starting again does not help. */
const DEATHS_ALLOWED = 5;
const WINDOW_MS = 120_000;
const FIRST_WAIT_MS = 500;
/** The worker finishes the frame it is at; after this it is ended all the same (its lease lets another take it). */
const STOP_GRACE_MS = 20_000;
const GUARD = path.join(import.meta.dirname, "end-with-parent.mjs");

/** Starts a program and starts it again, after a growing wait, whenever it ends without being asked to. */
export function supervise({ name, args, env, onGivenUp }: SuperviseOptions): Supervised {
  let isStopping = false;
  let child: ChildProcess | null = null;
  let waiting: NodeJS.Timeout | undefined;
  let deathsMs: number[] = [];

  function start(): void {
    const started = startChild({ name, args, env });
    child = started;
    started.once("exit", (code, signal) => {
      child = null;
      if (!isStopping) startAgain(signal ?? `code ${code}`);
    });
  }

  function startAgain(how: string): void {
    const nowMs = Date.now();
    deathsMs = [...deathsMs.filter((timeMs) => nowMs - timeMs < WINDOW_MS), nowMs];
    if (deathsMs.length > DEATHS_ALLOWED) {
      onGivenUp(`The ${name} process ended ${deathsMs.length} times within two minutes (last: ${how}).`);
      return;
    }
    const waitMs = FIRST_WAIT_MS * 2 ** (deathsMs.length - 1);
    console.error(`The ${name} process ended unexpectedly (${how}). Starting it again in ${waitMs / 1000} s.`);
    waiting = setTimeout(start, waitMs);
  }

  async function stop(): Promise<void> {
    isStopping = true;
    clearTimeout(waiting);
    if (child) await stopChild(child);
  }

  start();
  return { stop };
}

/** Starts a program that ends by itself. */
export function startOnce(options: ProgramOptions): Supervised {
  const child = startChild(options);
  return { stop: () => stopChild(child) };
}

function startChild({ name, args, env }: ProgramOptions): ChildProcess {
  // Its own process group: Ctrl-C reaches it through `stop` alone, once.
  const child = spawn(process.execPath, ["--import", GUARD, ...args], {
    env,
    stdio: ["ignore", "pipe", "pipe", "ipc"],
    detached: true,
  });
  printLines(child, name);
  return child;
}

async function stopChild(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const ended = new Promise((resolve) => child.once("exit", resolve));
  child.kill("SIGTERM");
  const kill = setTimeout(() => child.kill("SIGKILL"), STOP_GRACE_MS);
  await ended;
  clearTimeout(kill);
}

/** Passes a program's output on, line by line, so that lines of two programs never mix. */
function printLines(child: ChildProcess, name: string): void {
  if (child.stdout) createInterface({ input: child.stdout }).on("line", (line) => console.log(`[${name}] ${line}`));
  if (child.stderr) createInterface({ input: child.stderr }).on("line", (line) => console.error(`[${name}] ${line}`));
}
