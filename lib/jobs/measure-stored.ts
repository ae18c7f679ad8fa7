import "server-only";
import { setImmediate } from "node:timers/promises";
import { createPairMeasurer } from "@/lib/analysis/pair-measurer";
import type { FileId } from "@/lib/ids";
import { readRegistrationFile } from "@/lib/imaging/registration-file";
import { measureSsim } from "@/lib/imaging/structural-similarity";
import type { MeasurePair, SortFrame } from "@/lib/sorting/types";
import { registrationPath } from "@/lib/storage/paths";

/** Measures pairs of frames from their stored registration pictures, until `signal` says to stop. */
export function measurerFor(
  frames: readonly SortFrame[],
  fileIds: ReadonlyMap<string, FileId>,
  signal: AbortSignal,
): MeasurePair {
  const sizes = new Map(frames.map(({ id, measurements }) => [id, measurements]));
  return createPairMeasurer({
    load: async (id) => {
      const size = sizes.get(id);
      const fileId = fileIds.get(id);
      if (!size || !fileId) throw new Error(`no such frame: ${id}`);
      const image = await readRegistrationFile(registrationPath(fileId));
      return { image, widthPx: size.widthPx, heightPx: size.heightPx };
    },
    measureSsim,
    giveWay: async () => {
      // Lets the heartbeat through, and ends the work soon where the worker stops.
      await setImmediate();
      signal.throwIfAborted();
    },
  });
}
