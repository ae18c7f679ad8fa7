import { eq } from "drizzle-orm";
import { beforeEach, expect, test } from "vitest";
import { useDatabase } from "../support/database";
import { makePerson, makeProject } from "../support/people";
import { database, writeTransaction } from "@/db/client";
import { jobs } from "@/db/schema/jobs";
import type { ProjectId } from "@/lib/ids";
import {
  claimJob,
  type ClaimedJob,
  failJob,
  finishJob,
  giveBackJob,
  LEASE_MS,
  MOST_ATTEMPTS,
  renewLeases,
  requestJob,
} from "@/lib/jobs/queue";

// What whoever runs jobs may rely on.
useDatabase();
const NOW = 1_750_000_000_000;
let projectId: ProjectId;

beforeEach(async () => {
  projectId = await makeProject(await makePerson("Lena Lead"));
});

const ask = (key: string, delayMs = 0, nowMs = NOW) =>
  writeTransaction((tx) => requestJob(tx, { key, kind: "sort-project", projectId, payload: { key }, delayMs }, nowMs));

async function claim(nowMs = NOW): Promise<ClaimedJob> {
  const job = await claimJob("sort-project", nowMs);
  if (!job) throw new Error("nothing to claim");
  return job;
}

async function stateOf(key: string) {
  const [job] = await database()
    .select({ state: jobs.state, attempts: jobs.attempts, runAfterMs: jobs.runAfterMs })
    .from(jobs)
    .where(eq(jobs.key, key));
  return job;
}

test("of many who ask at once, one gets the job", async () => {
  await ask("a");
  const claims = await Promise.all(Array.from({ length: 8 }, () => claimJob("sort-project", NOW)));
  expect(claims.filter((job) => job !== null)).toHaveLength(1);
});

test("a job waits for its time, and kinds do not mix", async () => {
  await ask("a", 500);
  expect(await claimJob("sort-project", NOW + 499)).toBeNull();
  expect(await claimJob("analyse-file", NOW + 500)).toBeNull();
  expect((await claim(NOW + 500)).payload).toEqual({ key: "a" });
});

test("asking twice for the same work is one job, put off again", async () => {
  await ask("a", 1_000);
  await ask("a", 1_000, NOW + 800);
  expect(await claimJob("sort-project", NOW + 1_500)).toBeNull();
  await claim(NOW + 1_800);
  expect(await claimJob("sort-project", NOW + 1_800)).toBeNull();
});

test("asking while it runs makes it run once more", async () => {
  await ask("a");
  const job = await claim();
  await ask("a", 10, NOW + 5);
  expect(await claimJob("sort-project", NOW + 20)).toBeNull();
  await finishJob(job, NOW + 30);
  const again = await claim(NOW + 30);
  expect(again).toMatchObject({ id: job.id, attempts: 1 });
  await finishJob(again, NOW + 40);
  expect(await stateOf("a")).toMatchObject({ state: "done" });
});

test("a lease that runs out gives the job to another, and its old holder can no longer finish it", async () => {
  await ask("a");
  const dead = await claim();
  expect(await claimJob("sort-project", NOW + LEASE_MS)).toBeNull();
  const heir = await claim(NOW + LEASE_MS + 1);
  expect(heir).toMatchObject({ id: dead.id, attempts: 2 });
  await finishJob(dead, NOW + LEASE_MS + 2);
  await failJob(dead, "late", NOW + LEASE_MS + 2);
  await giveBackJob(dead, 0);
  expect(await stateOf("a")).toMatchObject({ state: "running", attempts: 2 });
  await finishJob(heir, NOW + LEASE_MS + 3);
  expect(await stateOf("a")).toMatchObject({ state: "done" });
});

test("a lease that is renewed holds", async () => {
  await ask("a");
  const job = await claim();
  await renewLeases("worker", [job.leaseToken], NOW + LEASE_MS - 1);
  expect(await claimJob("sort-project", NOW + LEASE_MS + 1)).toBeNull();
});

test("a failing job is tried again, later each time, and given up in the end", async () => {
  await ask("a");
  const waits: number[] = [];
  let nowMs = NOW;
  for (let attempt = 1; attempt <= MOST_ATTEMPTS; attempt += 1) {
    const job = await claim(nowMs);
    expect(job.attempts).toBe(attempt);
    await failJob(job, "no luck", nowMs);
    const { runAfterMs = nowMs } = (await stateOf("a")) ?? {};
    waits.push(runAfterMs - nowMs);
    nowMs = runAfterMs;
  }
  expect(waits).toEqual([1_000, 2_000, 4_000, 8_000]);
  expect(await stateOf("a")).toMatchObject({ state: "failed" });
  expect(await claimJob("sort-project", nowMs + 1)).toBeNull();
  await ask("a", 0, nowMs);
  expect(await claim(nowMs)).toMatchObject({ attempts: 1 });
});

test("asking while the last try fails begins anew", async () => {
  await ask("a");
  let job = await claim();
  for (let attempt = 1; attempt < MOST_ATTEMPTS; attempt += 1) {
    await failJob(job, "no luck", NOW);
    job = await claim(NOW + 60_000);
  }
  expect(job.attempts).toBe(MOST_ATTEMPTS);
  await ask("a", 10, NOW + 60_000);
  await failJob(job, "no luck", NOW + 60_020);
  expect(await claim(NOW + 60_020)).toMatchObject({ id: job.id, attempts: 1 });
});

test("a job given back untried keeps its tries", async () => {
  await ask("a");
  await giveBackJob(await claim(), NOW + 50);
  expect(await stateOf("a")).toMatchObject({ state: "waiting", attempts: 0, runAfterMs: NOW + 50 });
});
