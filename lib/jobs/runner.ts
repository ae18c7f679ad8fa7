import "server-only";
import { setTimeout as delay } from "node:timers/promises";
import {
  claimJob,
  type ClaimedJob,
  failJob,
  finishJob,
  giveBackJob,
  type JobKind,
  LEASE_MS,
  MOST_ATTEMPTS,
  removeWorker,
  renewLeases,
} from "@/lib/jobs/queue";

/** done: finished. later: too early, try again after a while; that is no failure. */
export type JobOutcome = { readonly type: "done" } | { readonly type: "later"; readonly afterMs: number };

export interface JobHandler {
  readonly kind: JobKind;
  /** Jobs of this kind at once. */
  readonly slots: number;
  /** May run twice for one job: its writes are safe to repeat. Stops early where `signal` says so. */
  readonly run: (job: ClaimedJob, signal: AbortSignal) => Promise<JobOutcome>;
  /** Records in plain words what became of it, when the last try has failed. */
  readonly giveUp: (job: ClaimedJob, error: unknown) => Promise<void>;
}

export interface RunnerOptions {
  readonly workerId: string;
  readonly handlers: readonly JobHandler[];
  /** Aborted: stop claiming, tell the running jobs, give back what does not end in time. */
  readonly signal: AbortSignal;
}

/** How often an idle worker looks for work, ms. */
const POLL_MS = 200;
/** How long running jobs may take to end when the worker stops, ms. */
const DRAIN_MS = 2_000;

/** Jobs under way, by lease token. */
type RunningJobs = Map<string, { readonly job: ClaimedJob; readonly ended: Promise<void> }>;

/** Runs jobs until `signal` is aborted. No failing job makes it reject. */
export async function runJobs({ workerId, handlers, signal }: RunnerOptions): Promise<void> {
  const running: RunningJobs = new Map();
  const beat = () => renewLeases(workerId, [...running.keys()], Date.now());
  await beat();
  const timer = setInterval(() => void beat().catch(reporter("heartbeat")), LEASE_MS / 4);
  try {
    while (!signal.aborted) {
      const hasStarted = await startJobs(handlers, running, signal).catch(reporter("claiming jobs"));
      if (!hasStarted) await somethingEnds(running, signal);
    }
    await drain(running);
  } finally {
    clearInterval(timer);
    await removeWorker(workerId);
  }
}

/** Fills one free slot of each kind. Returns whether a job was started. */
async function startJobs(handlers: readonly JobHandler[], running: RunningJobs, signal: AbortSignal) {
  let hasStarted = false;
  for (const handler of handlers) {
    const busy = [...running.values()].filter(({ job }) => job.kind === handler.kind).length;
    if (busy >= handler.slots || signal.aborted) continue;
    const job = await claimJob(handler.kind, Date.now());
    if (!job) continue;
    const ended = runJob(handler, job, signal)
      .catch(reporter(`job ${job.id}`))
      .then(() => void running.delete(job.leaseToken));
    running.set(job.leaseToken, { job, ended });
    hasStarted = true;
  }
  return hasStarted;
}

async function runJob(handler: JobHandler, job: ClaimedJob, signal: AbortSignal): Promise<void> {
  try {
    if (job.attempts > MOST_ATTEMPTS) throw new Error("The worker stopped each time it tried this.");
    const outcome = await handler.run(job, signal);
    if (outcome.type === "later") return await giveBackJob(job, Date.now() + outcome.afterMs);
    return await finishJob(job, Date.now());
  } catch (error) {
    if (signal.aborted) return await giveBackJob(job, 0);
    console.warn(`job ${job.kind} ${job.id} failed (try ${job.attempts} of ${MOST_ATTEMPTS})`, error);
    if (job.attempts >= MOST_ATTEMPTS) await handler.giveUp(job, error);
    await failJob(job, error instanceof Error ? error.message : String(error), Date.now());
  }
}

async function somethingEnds(running: RunningJobs, signal: AbortSignal): Promise<void> {
  // Ended with whatever ends first: left to run out, pauses would gather on the signal while many short jobs end.
  const over = new AbortController();
  const pause = delay(POLL_MS, undefined, { signal: AbortSignal.any([signal, over.signal]) }).catch(() => undefined);
  await Promise.race([pause, ...[...running.values()].map(({ ended }) => ended)]);
  over.abort();
}

async function drain(running: RunningJobs): Promise<void> {
  const all = Promise.all([...running.values()].map(({ ended }) => ended));
  await Promise.race([all, delay(DRAIN_MS)]);
  for (const { job } of running.values()) await giveBackJob(job, 0);
}

function reporter(what: string) {
  return (error: unknown) => {
    console.error(`${what} failed`, error);
    return false;
  };
}
