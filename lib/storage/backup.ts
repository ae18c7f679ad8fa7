import "server-only";
import { constants } from "node:fs";
import { copyFile, mkdir, readdir, stat } from "node:fs/promises";
import path from "node:path";
import { environment } from "@/lib/env";

/** The database's own files are copied by the database. */
const DATABASE_FILE = /\.db(-wal|-shm|-journal)?$/;

/**
 * Copies everything in the storage but the database, byte for byte. Originals are never rewritten, so copying them while
 * the product runs is safe; what goes while it is being copied was deleted by somebody and is left out. A folder that
 * is a symbolic link (originals on a larger disk) is copied like any other.
 * @returns how many files were copied
 */
export async function copyStorage(target: string): Promise<number> {
  const { storageDir } = environment();
  let copied = 0;
  for (const file of await listFiles(storageDir)) {
    const copy = path.join(target, path.relative(storageDir, file));
    await mkdir(path.dirname(copy), { recursive: true });
    if (await copyUnlessGone(file, copy)) copied++;
  }
  return copied;
}

async function listFiles(storageDir: string): Promise<string[]> {
  const files: string[] = [];
  for (const name of await readdir(storageDir)) {
    const top = path.join(storageDir, name);
    // Follows links; what is gone or leads nowhere is neither file nor folder.
    const found = await stat(top).catch(() => null);
    if (found?.isFile() && !DATABASE_FILE.test(name)) files.push(top);
    if (!found?.isDirectory()) continue;
    const entries = await readdir(top, { recursive: true, withFileTypes: true });
    files.push(...entries.filter((entry) => entry.isFile()).map((entry) => path.join(entry.parentPath, entry.name)));
  }
  return files;
}

async function copyUnlessGone(file: string, copy: string): Promise<boolean> {
  try {
    // Shares the blocks where the file system can; keeps the mode (the secret's is 600).
    await copyFile(file, copy, constants.COPYFILE_EXCL | constants.COPYFILE_FICLONE);
    return true;
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "ENOENT") return false;
    throw error;
  }
}
