import "server-only";
import { accessForJob } from "@/lib/auth/gate";
import { findWaitingFile, type WaitingFile } from "@/lib/frames/reads";
import { type AnalysisResult, recordAnalysis } from "@/lib/frames/writes";
import type { AnalysedPicture } from "@/lib/imaging/analyse-picture";
import type { AnalysisPool } from "@/lib/imaging/analysis-pool";
import { PictureError } from "@/lib/imaging/picture-error";
import { analysePayloadSchema } from "@/lib/jobs/requests";
import type { JobHandler } from "@/lib/jobs/runner";
import { originalPath, previewPath, registrationPath, thumbnailPath } from "@/lib/storage/paths";

/** Hashes, measures and previews one stored file, or says why it cannot be read. */
export function createAnalyseFileHandler(pool: AnalysisPool, slots: number): JobHandler {
  return {
    kind: "analyse-file",
    slots,
    run: async (job, signal) => {
      const access = accessForJob(job);
      const { fileId } = analysePayloadSchema.parse(job.payload);
      const file = await findWaitingFile(access, fileId);
      if (file) await recordAnalysis(access, fileId, await analyse(pool, file, signal), Date.now());
      return { type: "done" };
    },
    giveUp: async (job) => {
      const { fileId } = analysePayloadSchema.parse(job.payload);
      const reason = "The file is stored, but it could not be analysed after several tries. Bring it in again later.";
      await recordAnalysis(accessForJob(job), fileId, { type: "unreadable", sha256: null, reason }, Date.now());
    },
  };
}

async function analyse(pool: AnalysisPool, file: WaitingFile, signal: AbortSignal): Promise<AnalysisResult> {
  const task = {
    path: originalPath(file.uploadId),
    name: file.name,
    previewPath: previewPath(file.id),
    thumbnailPath: thumbnailPath(file.id),
    registrationPath: registrationPath(file.id),
  };
  try {
    return toResult(await pool.analyse(task, signal));
  } catch (error) {
    if (!(error instanceof PictureError)) throw error;
    return { type: "unreadable", sha256: error.file?.sha256 ?? null, reason: error.reason };
  }
}

function toResult({ sha256, mediaType, metadata, measurements }: AnalysedPicture): AnalysisResult {
  if (measurements) return { type: "picture", sha256, mediaType, metadata, measurements };
  return { type: "raw", sha256, mediaType };
}
