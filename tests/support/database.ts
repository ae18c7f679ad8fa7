import { copyFileSync, mkdirSync, mkdtempSync, readdirSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { sql } from "drizzle-orm";
import { afterAll, beforeAll, beforeEach } from "vitest";
import { closeDatabase, database } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";

/**
 * Gives every test of the calling file a storage directory of its own with a freshly migrated database: migrated once
 * for the file, copied for each test. Call it at the top of the file, before anything reads the environment.
 * @returns the storage directory's absolute path
 */
export function useDatabase(): string {
  const root = mkdtempSync(path.join(tmpdir(), "stackyard-test-"));
  const storageDir = path.join(root, "storage");
  const base = path.join(root, "base.db");
  process.env.STORAGE_DIR = storageDir;

  beforeAll(async () => {
    await migrateDatabase();
    // Closing does not empty the write-ahead log into the file at once.
    await database().run(sql`PRAGMA wal_checkpoint(TRUNCATE)`);
    await closeDatabase();
    copyFileSync(path.join(storageDir, "stackyard.db"), base);
  });
  beforeEach(async () => {
    await letPollerRest();
    await closeDatabase();
    mkdirSync(storageDir, { recursive: true });
    // Folders stay: the upload store makes its own in the background and must not meet their going.
    for (const entry of readdirSync(storageDir, { recursive: true, withFileTypes: true })) {
      if (!entry.isDirectory()) rmSync(path.join(entry.parentPath, entry.name));
    }
    copyFileSync(base, path.join(storageDir, "stackyard.db"));
  });
  afterAll(async () => {
    await letPollerRest();
    await closeDatabase();
    rmSync(root, { recursive: true });
  });
  return storageDir;
}

const holder: { stackyardPoller?: { readonly timer: NodeJS.Timeout | null } } = globalThis as object;

/** After its last page the poller of events looks at the database once more; not while that is being replaced. */
async function letPollerRest(): Promise<void> {
  const untilMs = Date.now() + 1000;
  while (holder.stackyardPoller?.timer && Date.now() < untilMs) await delay(20);
}
