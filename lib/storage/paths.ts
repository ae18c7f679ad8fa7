import "server-only";
import { mkdir } from "node:fs/promises";
import path from "node:path";
import { environment } from "@/lib/env";
import type { FileId, UploadId } from "@/lib/ids";

/**
 * Where things lie under STORAGE_DIR. Names are always generated ids, never what a person typed: a file's own name and
 * folder are only recorded in the database.
 *
 *     originals/UPLOAD       the bytes as they came in, from the first one on; never moved, never rewritten
 *     previews/FILE.jpg      at most 2 000 px, made by the worker
 *     thumbnails/FILE.jpg    at most 320 px
 *     registration/FILE.bin  16-bit grey picture for the sorting
 */
const FOLDERS = ["originals", "previews", "thumbnails", "registration"] as const;
type Folder = (typeof FOLDERS)[number];

export function originalsFolder(): string {
  return folder("originals");
}

export function originalPath(uploadId: UploadId): string {
  return path.join(folder("originals"), uploadId);
}

export function previewPath(fileId: FileId): string {
  return path.join(folder("previews"), `${fileId}.jpg`);
}

export function thumbnailPath(fileId: FileId): string {
  return path.join(folder("thumbnails"), `${fileId}.jpg`);
}

export function registrationPath(fileId: FileId): string {
  return path.join(folder("registration"), `${fileId}.bin`);
}

/** Makes the folders where they are missing; may be repeated. */
export async function prepareStorage(): Promise<void> {
  await Promise.all(FOLDERS.map((name) => mkdir(folder(name), { recursive: true })));
}

function folder(name: Folder): string {
  return path.join(environment().storageDir, name);
}
