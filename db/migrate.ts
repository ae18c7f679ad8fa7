import "server-only";
import { pathToFileURL } from "node:url";
import path from "node:path";
import { sql } from "drizzle-orm";
import { migrate } from "drizzle-orm/libsql/migrator";
import { closeDatabase, database } from "@/db/client";

/** Launch, the user command and the backup may all be the first to come: each of them fails the others once. */
const TRIES = 3;

/** Brings the database to the newest schema. Runs once, before web and worker start; may be repeated, and by several at once. */
export async function migrateDatabase(): Promise<void> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await migrateOnce();
    } catch (error) {
      if (attempt >= TRIES) throw error;
      // Another process was faster with the same step. What this one did of it is rolled back; its connection may have
      // met SQLITE_BUSY and is not to be trusted.
      await closeDatabase();
    }
  }
}

async function migrateOnce(): Promise<void> {
  const db = database();
  // Stays in the file: readers are not blocked by the writer, two processes can share it.
  await db.run(sql`PRAGMA journal_mode = WAL`);
  await migrate(db, { migrationsFolder: path.resolve(import.meta.dirname, "../drizzle") });
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  await migrateDatabase();
  await closeDatabase();
}
