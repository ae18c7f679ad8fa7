import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { accessForJob } from "@/lib/auth/gate";
import { getProgress } from "@/lib/frames/reads";
import type { Progress } from "@/lib/frames/schema";
import type { ProjectId } from "@/lib/ids";

const ROOT = path.resolve(import.meta.dirname, "../..");
const POLL_MS = 100;

/** The product's worker as a process of its own, on the test's storage. */
export class WorkerProcess {
  private readonly child: ChildProcess;
  output = "";

  constructor(storageDir: string) {
    this.child = spawn(process.execPath, ["--import", "tsx", "--conditions=react-server", "worker.ts"], {
      cwd: ROOT,
      env: { ...process.env, STORAGE_DIR: storageDir, WORKER_CONCURRENCY: "2", NODE_ENV: "production" },
      stdio: ["ignore", "pipe", "pipe"],
    });
    for (const stream of [this.child.stdout, this.child.stderr]) {
      stream?.setEncoding("utf8").on("data", (text: string) => (this.output += text));
    }
  }

  /** Sends a signal and waits for the end. @returns exit code; null: ended by the signal */
  async end(signal: "SIGTERM" | "SIGKILL"): Promise<number | null> {
    if (this.child.exitCode === null && this.child.signalCode === null) {
      const exited = once(this.child, "exit");
      this.child.kill(signal);
      await exited;
    }
    return this.child.exitCode;
  }
}

/**
 * Polls a project's progress until `isEnough`, and checks at every poll what interfaces.md promises of the counts.
 * @throws Error when a promise is broken, or it takes longer than `withinMs`
 */
export async function watchProgress(
  projectId: ProjectId,
  isEnough: (progress: Progress) => boolean,
  withinMs = 120_000,
): Promise<Progress> {
  const until = Date.now() + withinMs;
  for (;;) {
    const progress = await getProgress(accessForJob({ projectId }));
    const { received, analysed, failed, total, sorted } = progress;
    const isConsistent =
      analysed + failed <= received && received <= total && !(sorted && analysed + failed < received);
    if (!isConsistent) throw new Error(`counts contradict each other: ${JSON.stringify(progress)}`);
    if (isEnough(progress)) return progress;
    if (Date.now() > until) throw new Error(`not within ${withinMs} ms: ${JSON.stringify(progress)}`);
    await delay(POLL_MS);
  }
}
