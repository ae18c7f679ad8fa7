import "server-only";
import { and, desc, eq, isNull } from "drizzle-orm";
import { database } from "@/db/client";
import { uploads } from "@/db/schema/frames";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { ProjectId, UploadId, UserId } from "@/lib/ids";

/** An upload as the protocol needs it. */
export interface UploadRecord {
  readonly id: UploadId;
  readonly projectId: ProjectId;
  readonly lengthBytes: number;
  readonly metadataHeader: string;
  readonly createdAtMs: number;
  readonly finishedAtMs: number | null;
}

const RECORD = {
  id: uploads.id,
  projectId: uploads.projectId,
  lengthBytes: uploads.lengthBytes,
  metadataHeader: uploads.metadataHeader,
  createdAtMs: uploads.createdAtMs,
  finishedAtMs: uploads.finishedAtMs,
};

/** An upload that is not cancelled, for the tus store. Who asks is checked before it is asked. */
export async function findUpload(id: UploadId): Promise<UploadRecord | null> {
  const [found] = await database()
    .select(RECORD)
    .from(uploads)
    .where(and(eq(uploads.id, id), isNull(uploads.cancelledAtMs)));
  return found ?? null;
}

/** The same, where it is this person's. */
export async function findOwnUpload(userId: UserId, id: UploadId): Promise<UploadRecord | null> {
  const [found] = await database()
    .select(RECORD)
    .from(uploads)
    .where(and(eq(uploads.id, id), eq(uploads.userId, userId), isNull(uploads.cancelledAtMs)));
  return found ?? null;
}

/** Uploads of all projects whose last byte is not recorded: for the recovery after a process was killed. */
export async function listUnrecordedUploads(): Promise<readonly UploadRecord[]> {
  return database()
    .select(RECORD)
    .from(uploads)
    .where(and(isNull(uploads.finishedAtMs), isNull(uploads.cancelledAtMs)));
}

/** A project's uploads under way, newest first. */
export async function listUnfinishedUploads(access: ProjectAccess) {
  return database()
    .select({
      id: uploads.id,
      userId: uploads.userId,
      name: uploads.name,
      folder: uploads.folder,
      lastModifiedMs: uploads.lastModifiedMs,
      bytes: uploads.lengthBytes,
      createdAtMs: uploads.createdAtMs,
    })
    .from(uploads)
    .where(and(eq(uploads.projectId, access.projectId), isNull(uploads.finishedAtMs), isNull(uploads.cancelledAtMs)))
    .orderBy(desc(uploads.createdAtMs), desc(uploads.id));
}
