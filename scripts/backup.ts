// `npm run --silent backup -- DIR`: copies database and storage into a new folder, while the product runs.
import { access, mkdir, readdir } from "node:fs/promises";
import path from "node:path";
import { copyDatabase } from "@/db/backup";
import { closeDatabase, databaseFile } from "@/db/client";
import { environment } from "@/lib/env";
import { copyStorage } from "@/lib/storage/backup";

async function backUp(target: string): Promise<void> {
  const { databaseUrl, storageDir } = environment();
  if (!databaseUrl.startsWith("file:")) throw new Error("Only a file: database is copied by this command.");
  // Opening would make an empty one, and the copy of it would look like a backup.
  const database = databaseFile(databaseUrl);
  await access(database).catch(() => {
    throw new Error(`There is no database at ${database}. Give STORAGE_DIR as it was given to the product.`);
  });
  if (target === storageDir || target.startsWith(storageDir + path.sep)) {
    throw new Error("A backup inside the storage folder would be lost with it. Choose another folder.");
  }
  await mkdir(target, { recursive: true });
  if ((await readdir(target)).length > 0) throw new Error(`${target} is not empty. Give each backup its own folder.`);
  // The database first: every original it speaks of is then still to be copied.
  await copyDatabase(path.join(target, "stackyard.db"));
  const files = await copyStorage(target);
  console.log(`Copied the database and ${files} files to ${target}`);
}

// Originals, password hashes and the secret: for whoever makes the backup alone.
process.umask(0o077);
const [folder, ...more] = process.argv.slice(2);
try {
  if (!folder || more.length > 0) throw new Error("Use: npm run --silent backup -- DIR");
  await backUp(path.resolve(process.env.INIT_CWD ?? ".", folder));
} catch (error) {
  console.error(error instanceof Error ? error.message : String(error));
  process.exitCode = 2;
} finally {
  await closeDatabase();
}
