import { z } from "zod";
import { fileIdSchema, type FileId, type ProjectId, stackIdSchema } from "@/lib/ids";
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

/** Commands of one moment are measured together, ms. */
export const MEASURE_DELAY_MS = 1_000;

/** Stacks whose frames or reference changed; new neighbours are found without being named. */
export const measurePayloadSchema = z.object({ stackIds: z.array(stackIdSchema) });

export function measureJobRequest(projectId: ProjectId, stackIds: readonly string[], delayMs: number): JobRequest {
  return { key: measureJobKey(projectId), kind: "measure-stacks", projectId, payload: { stackIds }, delayMs };
}

export function measureJobKey(projectId: ProjectId): string {
  return `measure:${projectId}`;
}
