import "server-only";
import { sql } from "drizzle-orm";
import { database } from "@/db/client";

/**
 * Writes a consistent copy of the database to a new file, while others read and write.
 * @throws where the file exists already
 */
export async function copyDatabase(file: string): Promise<void> {
  await database().run(sql`VACUUM INTO ${file}`);
}
