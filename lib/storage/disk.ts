import "server-only";
import { randomUUID } from "node:crypto";
import { open, rm, stat, statfs, writeFile } from "node:fs/promises";
import path from "node:path";
import { environment } from "@/lib/env";
import { AppError } from "@/lib/errors/app-error";
import type { FileId, UploadId } from "@/lib/ids";
import { originalPath, originalsFolder, previewPath, registrationPath, thumbnailPath } from "@/lib/storage/paths";

/** Bytes of a stored original so far; null where there is none. */
export async function storedBytes(uploadId: UploadId): Promise<number | null> {
  const found = await statOrNull(originalPath(uploadId));
  return found ? found.size : null;
}

/** When a byte of it last came in, ms UTC; null where there is none. */
export async function lastByteAtMs(uploadId: UploadId): Promise<number | null> {
  const found = await statOrNull(originalPath(uploadId));
  return found ? found.mtimeMs : null;
}

/** Returns once the original's bytes and its name are on the disk, so that a power cut cannot take them back. */
export async function syncOriginal(uploadId: UploadId): Promise<void> {
  await sync(originalPath(uploadId));
  await sync(originalsFolder());
}

/**
 * Deletes an unfinished upload's bytes, or everything of a file whose project is deleted. Missing ones are no error.
 * @returns bytes freed
 */
export async function removeStored(stored: {
  readonly uploadIds: readonly UploadId[];
  readonly fileIds: readonly FileId[];
}): Promise<number> {
  const derived = stored.fileIds.flatMap((id) => [previewPath(id), thumbnailPath(id), registrationPath(id)]);
  let freedBytes = 0;
  for (const target of [...stored.uploadIds.map(originalPath), ...derived]) {
    freedBytes += (await statOrNull(target))?.size ?? 0;
    await rm(target, { force: true });
  }
  return freedBytes;
}

/**
 * Makes sure that `bytes` more leave the storage reserve untouched.
 * @throws AppError storage_full
 */
export async function requireSpace(bytes: number): Promise<void> {
  if ((await freeBytes()) - bytes >= environment().storageReserveBytes) return;
  throw storageFull();
}

export function storageFull(): AppError {
  return new AppError(
    "storage_full",
    "The server's storage is full: nothing more can be brought in. What has arrived is safe. " +
      "Ask the administrator to free space, then bring the rest in again.",
  );
}

/** @throws where the storage cannot be written to */
export async function probeStorage(): Promise<void> {
  const probe = path.join(environment().storageDir, `.probe-${randomUUID()}`);
  try {
    await writeFile(probe, "");
  } finally {
    await rm(probe, { force: true });
  }
}

async function freeBytes(): Promise<number> {
  const disk = await statfs(environment().storageDir);
  return disk.bavail * disk.bsize;
}

async function sync(target: string): Promise<void> {
  const handle = await open(target, "r");
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

async function statOrNull(target: string) {
  try {
    return await stat(target);
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "ENOENT") return null;
    throw error;
  }
}
