import "server-only";
import { accessForJob, type ProjectAccess } from "@/lib/auth/gate";
import { findSortBasis } from "@/lib/board/sorting-reads";
import { recordSortFailure, storeProposal } from "@/lib/board/writes";
import { hasWaitingFiles } from "@/lib/frames/reads";
import { listUnfinishedUploads } from "@/lib/intake/reads";
import { measurerFor } from "@/lib/jobs/measure-stored";
import type { JobHandler } from "@/lib/jobs/runner";
import type { MeasurePair, SortFrames } from "@/lib/sorting/types";
import { lastByteAtMs } from "@/lib/storage/disk";

/** An upload that has not moved for so long is stalled: the board does not wait for it. ms. */
const STALLED_MS = 10_000;
/** How soon to look again whether everything is in, ms. */
const LOOK_AGAIN_MS = 700;

/** Works out the board from everything that is analysed, once files stop coming in. */
export function createSortProjectHandler(sortFrames: SortFrames): JobHandler {
  return {
    kind: "sort-project",
    slots: 1,
    run: async (job, signal) => {
      const access = accessForJob(job);
      const remember = rememberPairs();
      try {
        // A command that comes in between makes a try stale. The next one starts from what is decided by then, and
        // takes a fraction of the time, since its pairs are known: people who go on working do not hold it up.
        for (;;) {
          signal.throwIfAborted();
          if (await isBusy(access)) return { type: "later", afterMs: LOOK_AGAIN_MS };
          const basis = await findSortBasis(access);
          if (!basis || basis.isCovered) return { type: "done" };
          const measure = remember(measurerFor(basis.input.frames, basis.fileIds, signal));
          const proposal = await sortFrames(basis.input, measure);
          if (await storeProposal(access, basis, proposal, Date.now())) return { type: "done" };
        }
      } catch (error) {
        if (!signal.aborted) await recordSortFailure(access, RETRYING, Date.now());
        throw error;
      }
    },
    giveUp: (job) => recordSortFailure(accessForJob(job), GIVEN_UP, Date.now()),
  };
}

const RETRYING = "The frames could not be sorted; it is tried again. Every file is safe.";
const GIVEN_UP =
  "The frames could not be sorted, after several tries. Every file is safe. " +
  "Tell the administrator; bringing in another frame starts a new try.";

/** Lets measurers of several tries share what they measured: pictures do not change, so a pair is measured once. */
function rememberPairs(): (measurePair: MeasurePair) => MeasurePair {
  const known = new Map<string, ReturnType<MeasurePair>>();
  return (measurePair) => (a, b, effort) => {
    const key = `${a} ${b} ${effort ?? "plain"}`;
    const measure = known.get(key) ?? measurePair(a, b, effort);
    known.set(key, measure);
    return measure;
  };
}

async function isBusy(access: ProjectAccess): Promise<boolean> {
  if (await hasWaitingFiles(access)) return true;
  for (const { id } of await listUnfinishedUploads(access)) {
    const movedAtMs = await lastByteAtMs(id);
    if (movedAtMs !== null && Date.now() - movedAtMs < STALLED_MS) return true;
  }
  return false;
}
