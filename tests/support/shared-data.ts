import { existsSync, readdirSync } from "node:fs";
import { join, resolve } from "node:path";

/** Where the shared data lies: SHARED_DIR, else beside the project. */
export const SHARED_DATA = resolve(process.env.SHARED_DIR ?? "../shared", "data");

/** Files of one folder of the shared data, full paths in order of name; none where the folder is absent. */
export function listShared(folder: string): string[] {
  const path = join(SHARED_DATA, folder);
  if (!existsSync(path)) return [];
  return readdirSync(path)
    .sort()
    .map((name) => join(path, name));
}

/** Whether that folder is there; tests that need it are skipped by name where it is not. */
export function hasShared(folder: string): boolean {
  return existsSync(join(SHARED_DATA, folder));
}
