// The second process: analyses files, sorts projects, and mends what a killed process left behind.
import { setTimeout as delay } from "node:timers/promises";
import { countOf } from "@/lib/board/words";
import { environment } from "@/lib/env";
import { keepParametersOutOfLogs } from "@/lib/errors/logs";
import { pruneEvents } from "@/lib/events/publish";
import { newId } from "@/lib/ids";
import { createAnalysisPool } from "@/lib/imaging/analysis-pool";
import { finishCompleteUploads } from "@/lib/intake/finish";
import { createAnalyseFileHandler } from "@/lib/jobs/handlers/analyse-file";
import { createMeasureStacksHandler } from "@/lib/jobs/handlers/measure-stacks";
import { createSortProjectHandler } from "@/lib/jobs/handlers/sort-project";
import { forgetWorkers } from "@/lib/jobs/queue";
import { runJobs } from "@/lib/jobs/runner";
import { prunePresences } from "@/lib/presence/writes";
import { sweepRemovals } from "@/lib/projects/writes";
import { sortFrames } from "@/lib/sorting/sort-frames";
import { prepareStorage } from "@/lib/storage/paths";

const UPKEEP_MS = 60_000;
/** A living web process records an upload this long after its last byte at the latest. */
const RECORDING_MS = 5_000;
/** The second look comes sooner: what was too fresh for the first is not any more. */
const SECOND_UPKEEP_MS = 2 * RECORDING_MS;
/** A worker that was not heard of for so long is dead. */
const WORKER_DEAD_MS = 60 * 60 * 1000;

const stopping = new AbortController();
for (const name of ["SIGTERM", "SIGINT"] as const) process.on(name, () => stopping.abort());

/** Finishes uploads that are complete but not recorded, clears deleted projects' files and old rows, now and every minute. */
async function keepUp(signal: AbortSignal): Promise<void> {
  let waitMs = SECOND_UPKEEP_MS;
  while (!signal.aborted) {
    try {
      const finished = await finishCompleteUploads(Date.now() - RECORDING_MS);
      if (finished > 0) console.log(`recorded ${countOf(finished, "complete upload")} that a stopped process had left`);
      await sweepRemovals(Date.now());
      await pruneEvents(Date.now());
      await prunePresences(Date.now());
      await forgetWorkers(Date.now() - WORKER_DEAD_MS);
    } catch (error) {
      console.error("upkeep failed; it is tried again in a minute", error);
    }
    await delay(waitMs, undefined, { signal }).catch(() => undefined);
    waitMs = UPKEEP_MS;
  }
}

keepParametersOutOfLogs();
await prepareStorage();
const concurrency = environment().workerConcurrency;
const pool = createAnalysisPool({ size: concurrency });
const upkeep = keepUp(stopping.signal);
const handlers = [
  createAnalyseFileHandler(pool, concurrency),
  createSortProjectHandler(sortFrames),
  createMeasureStacksHandler(),
];
await runJobs({ workerId: newId(), handlers, signal: stopping.signal });
await pool.close();
await upkeep;
// Whatever still holds the process (a sorting that was given back) must not keep it.
process.exit(0);
