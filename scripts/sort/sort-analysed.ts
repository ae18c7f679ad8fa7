import { createPairMeasurer } from "@/lib/analysis/pair-measurer";
import { readRegistrationFile } from "@/lib/imaging/registration-file";
import { measureSsim } from "@/lib/imaging/structural-similarity";
import { sortFrames } from "@/lib/sorting/sort-frames";
import type { MeasurePair, Proposal, SortFrame, SortOptions, SortProgress } from "@/lib/sorting/types";
import type { AnalysedFrame } from "./analyse-files";

/** Nothing to keep facts of: a folder is sorted from nothing each time. */
const NO_FACTS = { stacks: [], looseFrameIds: [], setAside: {}, settledQuestionKeys: [] };

/** Sorts frames whose registration images lie in files. */
export function sortAnalysed(
  frames: readonly AnalysedFrame[],
  options: SortOptions,
  onProgress?: (progress: SortProgress) => void,
): Promise<Proposal> {
  const input = { frames: frames.map(toSortFrame), facts: NO_FACTS, options };
  return sortFrames(input, makeMeasurer(frames), onProgress);
}

function toSortFrame({ id, name, files, lastModifiedMs, metadata, measurements }: AnalysedFrame): SortFrame {
  return { id, name, folder: files[0]?.folder ?? null, lastModifiedMs, metadata, measurements };
}

function makeMeasurer(frames: readonly AnalysedFrame[]): MeasurePair {
  const byId = new Map(frames.map((frame) => [frame.id, frame]));
  return createPairMeasurer({
    load: async (id) => {
      const frame = byId.get(id);
      if (!frame) throw new Error(`no frame ${id}`);
      const { widthPx, heightPx } = frame.measurements;
      return { image: await readRegistrationFile(frame.registrationPath), widthPx, heightPx };
    },
    measureSsim,
  });
}
