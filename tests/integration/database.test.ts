import { spawn } from "node:child_process";
import { once } from "node:events";
import path from "node:path";
import { createClient } from "@libsql/client";
import { sql } from "drizzle-orm";
import { expect, test } from "vitest";
import { database, writeTransaction } from "@/db/client";
import { members } from "@/db/schema/projects";
import { migrateDatabase } from "@/db/migrate";
import { projectIdSchema, userIdSchema } from "@/lib/ids";
import { useDatabase } from "../support/database";

const storageDir = useDatabase();
const ROOT = path.resolve(import.meta.dirname, "../..");

test("foreign keys are on after a transaction", async () => {
  await writeTransaction((tx) => tx.run(sql`select 1`));
  expect(await database().get(sql`PRAGMA foreign_keys`)).toEqual({ foreign_keys: 1 });
  const orphan = {
    projectId: projectIdSchema.parse("nowhere"),
    userId: userIdSchema.parse("nobody"),
    role: "lead" as const,
    joinedAtMs: 0,
  };
  await expect(writeTransaction((tx) => tx.insert(members).values(orphan))).rejects.toThrow();
  expect(await database().select({ id: members.userId }).from(members)).toEqual([]);
});

test("a transaction that throws leaves nothing, and the next one works", async () => {
  await database().run(sql`create table probe (n integer primary key)`);
  const failing = writeTransaction(async (tx) => {
    await tx.run(sql`insert into probe values (1)`);
    throw new Error("changed my mind");
  });
  await expect(failing).rejects.toThrow("changed my mind");
  await writeTransaction((tx) => tx.run(sql`insert into probe values (2)`));
  expect(await database().all(sql`select n from probe`)).toEqual([{ n: 2 }]);
});

test("writes of one process wait for one another", async () => {
  await database().run(sql`create table probe (n integer primary key)`);
  await Promise.all(
    Array.from({ length: 50 }, (_, n) => writeTransaction((tx) => tx.run(sql`insert into probe values (${n})`))),
  );
  expect(await database().get(sql`select count(*) as n from probe`)).toEqual({ n: 50 });
});

test("migrating twice changes nothing", async () => {
  const schema = sql`select name, sql from sqlite_master order by name`;
  const before = await database().all(schema);
  await migrateDatabase();
  expect(await database().all(schema)).toEqual(before);
});

// stack.md, trap 2: after SQLITE_BUSY a libSQL connection reports writes as done that are never committed. Another
// process writes all the time and now and then holds the lock; what this one was told is written must be in the file,
// read by a connection of its own.
test("a write acknowledged under contention from a second process is really there", { timeout: 60_000 }, async () => {
  await database().run(sql`create table probe (writer text, n integer)`);
  const other = spawn(
    process.execPath,
    ["--import", "tsx", "--conditions=react-server", path.join(ROOT, "tests/support/second-writer.ts")],
    { cwd: ROOT, env: { ...process.env, STORAGE_DIR: storageDir }, stdio: ["ignore", "pipe", "inherit"] },
  );
  let output = "";
  other.stdout.setEncoding("utf8").on("data", (text: string) => (output += text));
  await once(other.stdout, "data"); // it writes now

  let acknowledged = 0;
  let refused = 0;
  while (other.exitCode === null) {
    const outcome = await writeTransaction((tx) =>
      tx.run(sql`insert into probe values ('this', ${acknowledged})`),
    ).then(
      () => "written",
      () => "refused",
    );
    if (outcome === "written") acknowledged += 1;
    else refused += 1;
    // libSQL answers synchronously: without a turn of the event loop the other's end would never be seen.
    await new Promise((resolve) => setImmediate(resolve));
  }
  const acknowledgedThere = Number(/acknowledged (\d+)/.exec(output)?.[1]);

  const reader = createClient({ url: `file:${path.join(storageDir, "stackyard.db")}` });
  const { rows } = await reader.execute("select writer, count(*) as n from probe group by writer order by writer");
  reader.close();
  expect(rows.map((row) => [row.writer, row.n])).toEqual([
    ["other", acknowledgedThere],
    ["this", acknowledged],
  ]);
  expect(acknowledged).toBeGreaterThan(10);
  expect(acknowledgedThere).toBeGreaterThan(10);
  // Nothing waits longer than its timeout here: both hold the lock for a moment only.
  expect(refused).toBe(0);
});
