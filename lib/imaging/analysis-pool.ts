import { fork, type ChildProcess } from "node:child_process";
import { resolve } from "node:path";
import { fileURLToPath } from "node:url";

import { childEnvironment } from "@/lib/env";
import type { AnalysedPicture, PictureTask } from "@/lib/imaging/analyse-picture";
import type { AnalysisReply, AnalysisRequest } from "@/lib/imaging/analysis-messages";
import { PictureError, REASONS } from "@/lib/imaging/picture-error";

/** A picture of MAX_PIXELS takes about 15 s on a slow machine; whatever takes this long hangs. */
const LONGEST_ANALYSIS_SECONDS = 120;
/** A child that has not loaded by then never will: a broken installation, not a picture. */
const LONGEST_START_SECONDS = 60;
/**
 * Children that one picture may take with it. A second one, since the system may have ended the first for want of
 * memory or a person by hand, and the picture must not be called damaged for that.
 */
const CRASHES_ALLOWED = 2;
/** JavaScript's own memory in a child; pixels lie outside it. MiB. */
const CHILD_HEAP_MIB = 256;

const ROOT = fileURLToPath(new URL("../..", import.meta.url));
const CHILD = fileURLToPath(new URL("./analysis-child.ts", import.meta.url));

/**
 * glibc gives each thread that decodes an arena of its own and keeps what is freed there. With two arenas a reader of
 * 24 MP frames peaks at 259 MB instead of 392, in the same time (our own measurement).
 */
const FEW_ARENAS = { MALLOC_ARENA_MAX: "2" };

export interface AnalysisPool {
  /**
   * Reads one picture in a child process; waits for a free one.
   * @throws PictureError when the picture cannot be read, or crashed or stalled its child
   * @throws Error named AbortError when the signal fires or the pool closes
   * @throws Error for whatever is not the picture's fault (disk full, file gone)
   */
  analyse(task: PictureTask, signal?: AbortSignal): Promise<AnalysedPicture>;
  /** Stops all children at once; what is under way or waiting is rejected with an AbortError. Safe to repeat. */
  close(): Promise<void>;
}

export interface AnalysisPoolOptions {
  /** Children, and so pictures read at once. */
  readonly size: number;
  readonly longestSeconds?: number;
  /** Another program in the children's place; for tests. */
  readonly childPath?: string;
}

interface Job {
  readonly task: PictureTask;
  readonly resolve: (picture: AnalysedPicture) => void;
  readonly reject: (error: Error) => void;
  readonly signal: AbortSignal | undefined;
  readonly onAbort: () => void;
  crashes: number;
}

interface Member {
  readonly child: ChildProcess;
  isReady: boolean;
  job: Job | null;
  timer: NodeJS.Timeout | null;
}

/**
 * A fixed number of child processes that read pictures, one each at a time. A child that crashes, stalls or runs out
 * of memory fails its own picture only (a crash at the second try) and is replaced; children end when this process does.
 */
export function createAnalysisPool(options: AnalysisPoolOptions): AnalysisPool {
  return new ChildPool(options);
}

class ChildPool implements AnalysisPool {
  private readonly members = new Set<Member>();
  private readonly waiting: Job[] = [];
  private readonly size: number;
  private readonly longestSeconds: number;
  private readonly childPath: string;
  private isClosed = false;
  /** Starts that failed one after another: after a few, pictures fail instead of waiting for ever. */
  private failedStarts = 0;

  constructor(options: AnalysisPoolOptions) {
    this.size = Math.max(1, Math.floor(options.size));
    this.longestSeconds = options.longestSeconds ?? LONGEST_ANALYSIS_SECONDS;
    this.childPath = options.childPath ?? CHILD;
  }

  analyse(task: PictureTask, signal?: AbortSignal): Promise<AnalysedPicture> {
    return new Promise((fulfil, reject) => {
      if (this.isClosed || signal?.aborted) return reject(abortError());
      const job: Job = {
        task: absolute(task),
        resolve: fulfil,
        reject,
        signal,
        onAbort: () => this.abort(job),
        crashes: 0,
      };
      signal?.addEventListener("abort", job.onAbort, { once: true });
      this.waiting.push(job);
      this.next();
    });
  }

  async close(): Promise<void> {
    this.isClosed = true;
    for (const job of this.waiting.splice(0)) settle(job, () => job.reject(abortError()));
    await Promise.all([...this.members].map((member) => this.stop(member, abortError())));
  }

  /** Gives waiting pictures to idle children, and starts children while there are too few. */
  private next(): void {
    if (this.isClosed) return;
    for (const member of this.members) {
      if (!member.isReady || member.job !== null) continue;
      const job = this.waiting.shift();
      if (!job) return;
      this.give(member, job);
    }
    const starting = [...this.members].filter((member) => !member.isReady).length;
    const wanted = Math.min(this.size - this.members.size, this.waiting.length - starting);
    for (let i = 0; i < wanted; i += 1) this.start();
  }

  private start(): void {
    const child = fork(this.childPath, {
      cwd: ROOT,
      env: childEnvironment(FEW_ARENAS),
      execArgv: ["--import", "tsx", "--conditions=react-server", `--max-old-space-size=${CHILD_HEAP_MIB}`],
      // Decoders write their complaints there; what matters comes as a message.
      stdio: ["ignore", "ignore", "ignore", "ipc"],
    });
    const member: Member = { child, isReady: false, job: null, timer: null };
    this.members.add(member);
    member.timer = setTimeout(() => child.kill("SIGKILL"), LONGEST_START_SECONDS * 1000);
    child.on("message", (reply: AnalysisReply) => this.receive(member, reply));
    child.on("error", () => child.kill("SIGKILL"));
    child.on("exit", () => this.lose(member));
  }

  private give(member: Member, job: Job): void {
    member.job = job;
    member.timer = setTimeout(() => {
      const reason = REASONS.timeout(this.longestSeconds);
      void this.stop(member, new PictureError("timeout", reason));
    }, this.longestSeconds * 1000);
    const request: AnalysisRequest = { task: job.task };
    // A child that died this moment: its exit event fails the picture.
    member.child.send(request, () => undefined);
  }

  private receive(member: Member, reply: AnalysisReply): void {
    clear(member);
    if (reply.type === "ready") {
      member.isReady = true;
      this.failedStarts = 0;
    } else if (member.job) {
      const job = member.job;
      member.job = null;
      settle(job, () => (reply.type === "done" ? job.resolve(reply.picture) : job.reject(toError(reply))));
    }
    this.next();
  }

  /** A child has ended by itself. */
  private lose(member: Member): void {
    clear(member);
    if (!this.members.delete(member)) return;
    const { job } = member;
    member.job = null;
    if (job) this.recover(job);
    if (!member.isReady) this.countFailedStart();
    this.next();
  }

  private recover(job: Job): void {
    job.crashes += 1;
    if (job.crashes < CRASHES_ALLOWED) this.waiting.unshift(job);
    else settle(job, () => job.reject(new PictureError("crashed", REASONS.crashed)));
  }

  private countFailedStart(): void {
    this.failedStarts += 1;
    if (this.failedStarts <= this.size) return;
    const error = new Error("The program that reads pictures does not start. Run npm ci and start again.");
    for (const job of this.waiting.splice(0)) settle(job, () => job.reject(error));
    this.failedStarts = 0;
  }

  private stop(member: Member, error: Error): Promise<void> {
    clear(member);
    this.members.delete(member);
    const { job } = member;
    member.job = null;
    const isOver = member.child.exitCode !== null || member.child.signalCode !== null;
    const ended = isOver ? Promise.resolve() : new Promise<void>((done) => member.child.once("exit", () => done()));
    member.child.kill("SIGKILL");
    if (job) settle(job, () => job.reject(error));
    this.next();
    return ended;
  }

  private abort(job: Job): void {
    const at = this.waiting.indexOf(job);
    if (at >= 0) {
      this.waiting.splice(at, 1);
      settle(job, () => job.reject(abortError()));
      return;
    }
    const member = [...this.members].find((candidate) => candidate.job === job);
    if (member) void this.stop(member, abortError());
  }
}

function settle(job: Job, finish: () => void): void {
  job.signal?.removeEventListener("abort", job.onAbort);
  finish();
}

function clear(member: Member): void {
  if (member.timer !== null) clearTimeout(member.timer);
  member.timer = null;
}

function toError(reply: Exclude<AnalysisReply, { type: "ready" | "done" }>): Error {
  if (reply.type === "refused") return new PictureError(reply.code, reply.reason, reply.file);
  return new Error(reply.message);
}

function abortError(): Error {
  return Object.assign(new Error("Reading pictures was stopped"), { name: "AbortError" });
}

/** Children run in the project's folder, wherever the command was given. */
function absolute(task: PictureTask): PictureTask {
  const full = (path: string | null) => (path === null ? null : resolve(path));
  return {
    ...task,
    path: resolve(task.path),
    previewPath: full(task.previewPath),
    thumbnailPath: full(task.thumbnailPath),
    registrationPath: full(task.registrationPath),
  };
}
