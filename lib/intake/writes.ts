import "server-only";
import { and, eq, isNull } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { uploads } from "@/db/schema/frames";
import { publish } from "@/lib/events/publish";
import { recordFile } from "@/lib/frames/writes";
import type { UploadFacts } from "@/lib/intake/upload-metadata";
import type { UploadId, UserId } from "@/lib/ids";

export interface NewUpload {
  readonly id: UploadId;
  readonly userId: UserId;
  readonly facts: UploadFacts;
  readonly metadataHeader: string;
  readonly lengthBytes: number;
}

/** Records an upload before its first byte: what is not recorded is not taken. */
export async function createUpload({ facts, ...upload }: NewUpload, nowMs: number): Promise<void> {
  await writeTransaction(async (tx) => {
    await tx.insert(uploads).values({ ...facts, ...upload, createdAtMs: nowMs });
    await publish(tx, facts.projectId, { type: "upload.created", uploadId: upload.id }, nowMs);
  });
}

/** Cancels an upload whose last byte is not recorded. Returns whether it did: a finished one is never taken back. */
export async function cancelUpload(id: UploadId, nowMs: number): Promise<boolean> {
  return writeTransaction(async (tx) => {
    const [cancelled] = await tx
      .update(uploads)
      .set({ cancelledAtMs: nowMs })
      .where(and(eq(uploads.id, id), isNull(uploads.finishedAtMs), isNull(uploads.cancelledAtMs)))
      .returning({ projectId: uploads.projectId });
    if (!cancelled) return false;
    await publish(tx, cancelled.projectId, { type: "upload.cancelled", uploadId: id }, nowMs);
    return true;
  });
}

/**
 * Records that an upload's last byte is in: the upload, its file, the frame it belongs to, its first job and the event,
 * all or nothing. May be repeated, and by two processes at once: only the first does it.
 */
export async function recordFinishedUpload(id: UploadId, nowMs: number): Promise<void> {
  await writeTransaction(async (tx) => {
    const [upload] = await tx
      .update(uploads)
      .set({ finishedAtMs: nowMs })
      .where(and(eq(uploads.id, id), isNull(uploads.finishedAtMs), isNull(uploads.cancelledAtMs)))
      .returning({
        uploadId: uploads.id,
        projectId: uploads.projectId,
        name: uploads.name,
        folder: uploads.folder,
        lastModifiedMs: uploads.lastModifiedMs,
        bytes: uploads.lengthBytes,
      });
    if (upload) await recordFile(tx, upload, nowMs);
  });
}
