import "server-only";
import { accessForJob } from "@/lib/auth/gate";
import { measureStacks } from "@/lib/board/measure-stacks";
import { storeMeasured } from "@/lib/board/measure-writes";
import { getBoard } from "@/lib/board/reads";
import { findSortBasis } from "@/lib/board/sorting-reads";
import { measurerFor } from "@/lib/jobs/measure-stored";
import { measurePayloadSchema } from "@/lib/jobs/requests";
import type { JobHandler } from "@/lib/jobs/runner";

/** Measures anew what people's commands touched. What changes meanwhile is asked for again by whoever changes it. */
export function createMeasureStacksHandler(): JobHandler {
  return {
    kind: "measure-stacks",
    slots: 1,
    run: async (job, signal) => {
      const access = accessForJob(job);
      const { stackIds } = measurePayloadSchema.parse(job.payload);
      const basis = await findSortBasis(access);
      if (!basis) return { type: "done" };
      const { frames, options, facts } = basis.input;
      const board = await getBoard(access);
      const measurePair = measurerFor(frames, basis.fileIds, signal);
      const { softLimit } = options;
      const { settledQuestionKeys } = facts;
      const measured = await measureStacks({ board, frames, stackIds, measurePair, softLimit, settledQuestionKeys });
      await storeMeasured(access, measured, Date.now());
      return { type: "done" };
    },
    // The board goes on saying "not measured" there, which is true; the next command or sorting measures it.
    giveUp: () => Promise.resolve(),
  };
}
