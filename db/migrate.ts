import "server-only";
import { pathToFileURL } from "node:url";
import path from "node:path";
import { sql } from "drizzle-orm";
import { migrate } from "drizzle-orm/libsql/migrator";
import { closeDatabase, database } from "@/db/client";

/** Brings the database to the newest schema. Runs once, before web and worker start; may be repeated. */
export async function migrateDatabase(): Promise<void> {
  const db = database();
  // Stays in the file: readers are not blocked by the writer, two processes can share it.
  await db.run(sql`PRAGMA journal_mode = WAL`);
  await migrate(db, { migrationsFolder: path.resolve(import.meta.dirname, "../drizzle") });
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  await migrateDatabase();
  await closeDatabase();
}
