import "server-only";
import type { UploadId } from "@/lib/ids";
import { findUpload, listUnrecordedUploads } from "@/lib/intake/reads";
import { recordFinishedUpload } from "@/lib/intake/writes";
import { lastByteAtMs, storedBytes, syncOriginal } from "@/lib/storage/disk";

/**
 * Records an upload whose last byte is in, once its bytes are safe on the disk. Called before the answer to that byte,
 * and again by the recovery where a process was killed in between: it may be repeated.
 */
export async function finishUpload(id: UploadId): Promise<void> {
  await syncOriginal(id);
  await recordFinishedUpload(id, Date.now());
}

/** Finishes an upload that is complete but not recorded. Returns whether it was. */
export async function finishIfComplete(id: UploadId): Promise<boolean> {
  const upload = await findUpload(id);
  if (!upload || upload.finishedAtMs !== null) return false;
  if ((await storedBytes(id)) !== upload.lengthBytes) return false;
  await finishUpload(id);
  return true;
}

/**
 * Recovery: a process that dies between the last byte and its record leaves a complete upload that no client will ever
 * send to again. Runs at the worker's start and every minute.
 * @param untilMs - uploads whose last byte came later are left alone: a living process is about to record them
 * @returns how many were finished
 */
export async function finishCompleteUploads(untilMs: number): Promise<number> {
  let finished = 0;
  for (const { id } of await listUnrecordedUploads()) {
    const movedAtMs = await lastByteAtMs(id);
    if (movedAtMs === null || movedAtMs > untilMs) continue;
    if (await finishIfComplete(id)) finished += 1;
  }
  return finished;
}
