import type { Dirent } from "node:fs";
import { open, readdir } from "node:fs/promises";
import path from "node:path";

import { HEAD_BYTES, hasPictureExtension, isHiddenName, isPictureFile } from "@/lib/intake/picture-files";

export interface FoundFile {
  readonly name: string;
  /** Relative to the sorted folder, "/" between names; null at its root. */
  readonly folder: string | null;
  /** Absolute. */
  readonly path: string;
  readonly lastModifiedMs: number;
}

export interface FoundFiles {
  /** By folder and name. */
  readonly pictures: readonly FoundFile[];
  readonly hidden: number;
  readonly links: number;
  /** Not pictures. */
  readonly others: number;
  /** Sub-folders that may not be read. */
  readonly closed: number;
}

/** All picture files below a folder. Hidden files, symbolic links and files of other kinds are only counted. */
export async function collectFiles(root: string): Promise<FoundFiles> {
  const pictures: FoundFile[] = [];
  const counts = { hidden: 0, links: 0, others: 0, closed: 0 };
  const folders: (string | null)[] = [null];
  for (const folder of folders) {
    const here = folder === null ? root : path.join(root, folder);
    const entries = await list(here, folder === null);
    if (entries === null) {
      counts.closed++;
      continue;
    }
    for (const entry of entries) {
      const relative = folder === null ? entry.name : `${folder}/${entry.name}`;
      if (entry.isSymbolicLink()) counts.links++;
      else if (isHiddenName(entry.name)) counts.hidden++;
      else if (entry.isDirectory()) folders.push(relative);
      else if (!entry.isFile()) counts.others++;
      else {
        const file = await lookAt(path.join(here, entry.name), entry.name);
        if (file === null) counts.others++;
        else pictures.push({ ...file, folder, name: entry.name });
      }
    }
  }
  pictures.sort((a, b) => compare(a.folder ?? "", b.folder ?? "") || compare(a.name, b.name));
  return { pictures, ...counts };
}

/** What a folder holds; null where a sub-folder may not be read. The root must be readable: its failure is the caller's. */
async function list(folder: string, isRoot: boolean): Promise<Dirent[] | null> {
  try {
    return await readdir(folder, { withFileTypes: true });
  } catch (error) {
    if (isRoot) throw error;
    return null;
  }
}

function compare(a: string, b: string): number {
  if (a === b) return 0;
  return a < b ? -1 : 1;
}

/** Null where the file is no picture. One that cannot be opened counts by its name: why is said when it is read. */
async function lookAt(full: string, name: string): Promise<Pick<FoundFile, "path" | "lastModifiedMs"> | null> {
  try {
    const handle = await open(full);
    try {
      const { mtimeMs } = await handle.stat();
      const head = new Uint8Array(HEAD_BYTES);
      const { bytesRead } = await handle.read(head, 0, HEAD_BYTES, 0);
      return isPictureFile(name, head.subarray(0, bytesRead)) ? { path: full, lastModifiedMs: mtimeMs } : null;
    } finally {
      await handle.close();
    }
  } catch {
    return hasPictureExtension(name) ? { path: full, lastModifiedMs: 0 } : null;
  }
}
