import { existsSync, readdirSync } from "node:fs";
import { join } from "node:path";

import { environment } from "@/lib/env";

/** Whether a folder of the shared data is there; tests that need it are skipped by name where it is not. */
export function hasShared(folder: string): boolean {
  return existsSync(sharedPath(folder));
}

/** Full path of a folder or file of the shared data (see its README.md for what lies there). */
export function sharedPath(...names: string[]): string {
  return join(environment().sharedDir, "data", ...names);
}

/** Files of one folder of the shared data, full paths in order of name; none where the folder is absent. */
export function listShared(folder: string): string[] {
  if (!hasShared(folder)) return [];
  return readdirSync(sharedPath(folder))
    .sort()
    .map((name) => sharedPath(folder, name));
}
