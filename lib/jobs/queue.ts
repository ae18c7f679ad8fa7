import "server-only";
import { and, asc, eq, inArray, lt, lte, or, sql } from "drizzle-orm";
import { database, type Transaction, writeTransaction } from "@/db/client";
import { jobs, workers } from "@/db/schema/jobs";
import { newId, type ProjectId } from "@/lib/ids";

export type JobKind = (typeof jobs.kind.enumValues)[number];

/**
 * How long a claim holds without being renewed, ms. Renewed three times in that while; a worker that was killed gives
 * its jobs up after it.
 */
export const LEASE_MS = 15_000;

/** A job that fails this often is given up: the same picture would fail, or stop the worker, for ever. */
export const MOST_ATTEMPTS = 4;

const FIRST_RETRY_MS = 1_000;

export interface JobRequest {
  /** Asking twice for the same key is one job; asking while it runs runs it once more. */
  readonly key: string;
  readonly kind: JobKind;
  readonly projectId: ProjectId;
  readonly payload: Readonly<Record<string, unknown>>;
  readonly delayMs: number;
}

export interface ClaimedJob {
  readonly id: string;
  readonly kind: JobKind;
  readonly projectId: ProjectId;
  readonly payload: unknown;
  /** 1 at the first try. */
  readonly attempts: number;
  readonly leaseToken: string;
  readonly runAfterMs: number;
}

/** Asks for a job, in the transaction of what made it necessary. Of two askings the later payload counts. */
export async function requestJob(tx: Transaction, request: JobRequest, nowMs: number): Promise<void> {
  const { delayMs, ...row } = request;
  const runAfterMs = nowMs + delayMs;
  await tx
    .insert(jobs)
    .values({ id: newId(), ...row, state: "waiting", runAfterMs, createdAtMs: nowMs })
    .onConflictDoUpdate({
      target: jobs.key,
      set: {
        payload: row.payload,
        runAfterMs,
        // One that runs stays running; its later `runAfterMs` makes it run again when it is done.
        state: sql`case when ${jobs.state} = 'running' then 'running' else 'waiting' end`,
        attempts: sql`case when ${jobs.state} = 'running' then ${jobs.attempts} else 0 end`,
        error: null,
        finishedAtMs: null,
      },
    });
}

/** What a job that is not done yet was asked for with, and when it is due; null: there is none. */
export async function findRequested(
  tx: Transaction,
  key: string,
): Promise<(Pick<ClaimedJob, "payload" | "runAfterMs"> & { isRunning: boolean }) | null> {
  const [job] = await tx
    .select({ payload: jobs.payload, runAfterMs: jobs.runAfterMs, state: jobs.state })
    .from(jobs)
    .where(and(eq(jobs.key, key), inArray(jobs.state, ["waiting", "running"])));
  if (!job) return null;
  const { state, ...requested } = job;
  return { ...requested, isRunning: state === "running" };
}

/** The next job of a kind for this worker: compare-and-set on its state, so that nobody else has it. */
export async function claimJob(kind: JobKind, nowMs: number): Promise<ClaimedJob | null> {
  const isDue = or(
    and(eq(jobs.state, "waiting"), lte(jobs.runAfterMs, nowMs)),
    and(eq(jobs.state, "running"), lt(jobs.leaseUntilMs, nowMs)),
  );
  // A plain read first: an idle worker takes no write lock.
  const [candidate] = await database()
    .select({ id: jobs.id })
    .from(jobs)
    .where(and(eq(jobs.kind, kind), isDue))
    .orderBy(asc(jobs.runAfterMs), asc(jobs.createdAtMs), asc(jobs.id))
    .limit(1);
  if (!candidate) return null;
  const leaseToken = newId();
  const [claimed] = await writeTransaction((tx) =>
    tx
      .update(jobs)
      .set({ state: "running", leaseToken, leaseUntilMs: nowMs + LEASE_MS, attempts: sql`${jobs.attempts} + 1` })
      .where(and(eq(jobs.id, candidate.id), isDue))
      .returning({
        id: jobs.id,
        kind: jobs.kind,
        projectId: jobs.projectId,
        payload: jobs.payload,
        attempts: jobs.attempts,
        runAfterMs: jobs.runAfterMs,
      }),
  );
  return claimed ? { ...claimed, leaseToken } : null;
}

/** Renews what this worker holds and says that it is alive. */
export async function renewLeases(workerId: string, tokens: readonly string[], nowMs: number): Promise<void> {
  await writeTransaction(async (tx) => {
    await tx
      .insert(workers)
      .values({ id: workerId, startedAtMs: nowMs, seenAtMs: nowMs })
      .onConflictDoUpdate({ target: workers.id, set: { seenAtMs: nowMs } });
    if (tokens.length === 0) return;
    await tx
      .update(jobs)
      .set({ leaseUntilMs: nowMs + LEASE_MS })
      .where(and(eq(jobs.state, "running"), inArray(jobs.leaseToken, [...tokens])));
  });
}

/** Marks a job done; one asked for again while it ran waits for its next run. Only the holder of the lease can. */
export async function finishJob(job: ClaimedJob, nowMs: number): Promise<void> {
  const isAskedAgain = wasAskedAgain(job);
  await writeTransaction((tx) =>
    tx
      .update(jobs)
      .set({
        state: sql`case when ${isAskedAgain} then 'waiting' else 'done' end`,
        attempts: sql`case when ${isAskedAgain} then 0 else ${jobs.attempts} end`,
        leaseToken: null,
        leaseUntilMs: null,
        error: null,
        finishedAtMs: nowMs,
      })
      .where(isHeld(job)),
  );
}

/** Puts a job back, untried: the worker stops, or it is too early for it. */
export async function giveBackJob(job: ClaimedJob, runAfterMs: number): Promise<void> {
  await writeTransaction((tx) =>
    tx
      .update(jobs)
      .set({
        state: "waiting",
        attempts: sql`max(${jobs.attempts} - 1, 0)`,
        runAfterMs: sql`max(${jobs.runAfterMs}, ${runAfterMs})`,
        leaseToken: null,
        leaseUntilMs: null,
      })
      .where(isHeld(job)),
  );
}

/**
 * Records a failed try: it waits twice as long each time, and after the last is given up. One asked for again while it
 * ran begins anew instead: what it was asked for is no longer what failed.
 */
export async function failJob(job: ClaimedJob, error: string, nowMs: number): Promise<void> {
  const isLast = job.attempts >= MOST_ATTEMPTS;
  const isAskedAgain = wasAskedAgain(job);
  const retryAtMs = nowMs + FIRST_RETRY_MS * 2 ** (job.attempts - 1);
  await writeTransaction((tx) =>
    tx
      .update(jobs)
      .set({
        state: sql`case when ${isAskedAgain} then 'waiting' else ${isLast ? "failed" : "waiting"} end`,
        attempts: sql`case when ${isAskedAgain} then 0 else ${jobs.attempts} end`,
        runAfterMs: sql`case when ${isAskedAgain} then ${jobs.runAfterMs} else ${retryAtMs} end`,
        error,
        leaseToken: null,
        leaseUntilMs: null,
        finishedAtMs: isLast ? nowMs : null,
      })
      .where(isHeld(job)),
  );
}

/** Takes the worker off the list at its orderly end. */
export async function removeWorker(workerId: string): Promise<void> {
  await writeTransaction((tx) => tx.delete(workers).where(eq(workers.id, workerId)));
}

/** Clears the list of workers that died without taking themselves off it. */
export async function forgetWorkers(seenBeforeMs: number): Promise<void> {
  await writeTransaction((tx) => tx.delete(workers).where(lt(workers.seenAtMs, seenBeforeMs)));
}

/** When any worker was last heard of, ms; null: never. */
export async function findWorkerSeenAtMs(): Promise<number | null> {
  const [row] = await database()
    .select({ seenAtMs: sql<number | null>`max(${workers.seenAtMs})` })
    .from(workers);
  return row?.seenAtMs ?? null;
}

function wasAskedAgain(job: ClaimedJob) {
  return sql`${jobs.runAfterMs} <> ${job.runAfterMs}`;
}

function isHeld(job: ClaimedJob) {
  return and(eq(jobs.id, job.id), eq(jobs.state, "running"), eq(jobs.leaseToken, job.leaseToken));
}
