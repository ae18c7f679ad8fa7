import { z } from "zod";
import { fileIdSchema, type FileId, type ProjectId } from "@/lib/ids";
import type { JobRequest } from "@/lib/jobs/queue";

/** Quiet time after the last analysed file before a sorting starts, ms: three uploads at a time leave gaps of under 1 s. */
export const SORT_DELAY_MS = 1_500;

export const analysePayloadSchema = z.object({ fileId: fileIdSchema });

/** Asking again for a file that is analysed already does no harm. */
export function analyseJobRequest(projectId: ProjectId, fileId: FileId): JobRequest {
  return { key: `analyse:${fileId}`, kind: "analyse-file", projectId, payload: { fileId }, delayMs: 0 };
}

/** One per project: each asking puts it off again. */
export function sortJobRequest(projectId: ProjectId, delayMs: number): JobRequest {
  return { key: `sort:${projectId}`, kind: "sort-project", projectId, payload: {}, delayMs };
}
