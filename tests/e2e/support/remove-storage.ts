import { rm } from "node:fs/promises";

/** After the last test: the storage folder that the run made for itself. */
export default async function removeStorage(): Promise<void> {
  const folder = process.env.E2E_STORAGE_DIR;
  if (folder) await rm(folder, { recursive: true, force: true });
}
