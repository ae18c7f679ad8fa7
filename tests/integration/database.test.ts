import { spawn, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { createClient } from "@libsql/client";
import { sql } from "drizzle-orm";
import { drizzle } from "drizzle-orm/libsql";
import { expect, test } from "vitest";
import { database, writeTransaction } from "@/db/client";
import { members } from "@/db/schema/projects";
import { migrateDatabase } from "@/db/migrate";
import { projectIdSchema, userIdSchema } from "@/lib/ids";
import { useDatabase } from "../support/database";

const storageDir = useDatabase();
const DATABASE_URL = `file:${path.join(storageDir, "stackyard.db")}`;
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
// read by a connection of its own. Once as shipped, once so impatient that SQLITE_BUSY is met and must be mended.
test.each([
  { name: "as shipped", timeoutMs: null },
  { name: "meeting SQLITE_BUSY", timeoutMs: 1 },
])("a write acknowledged under contention from a second process is really there: $name", async ({ timeoutMs }) => {
  await database().run(sql`create table probe (writer text, n integer)`);
  const reconnects = timeoutMs === null ? null : beImpatient(timeoutMs);
  const other = await startSecondWriter();
  const counts = { acknowledged: 0, refused: 0 };
  while (other.process.exitCode === null) {
    const write = writeTransaction((tx) => tx.run(sql`insert into probe values ('this', ${counts.acknowledged})`));
    const isWritten = await write.then(
      () => true,
      () => false,
    );
    counts[isWritten ? "acknowledged" : "refused"] += 1;
    // libSQL answers synchronously: without a turn of the event loop the other's end would never be seen. SQLite's
    // waiting is not fair: without a pause one of the two might hardly come in.
    await delay(PAUSE_MS);
  }
  const acknowledgedThere = Number(/acknowledged (\d+)/.exec(other.output())?.[1]);
  expect(await countRows()).toEqual({ other: acknowledgedThere, this: counts.acknowledged });
  expect(counts.acknowledged).toBeGreaterThan(10);
  expect(acknowledgedThere).toBeGreaterThan(10);
  // As shipped nothing waits longer than its timeout; impatient, the case that matters must have come up.
  if (reconnects === null) expect(counts.refused).toBe(0);
  else expect(reconnects.count).toBeGreaterThan(0);
});

const PAUSE_MS = 2;

/** Replaces this process's connection by one that waits only so long for the other process's lock. */
function beImpatient(timeoutMs: number): { count: number } {
  const client = createClient({ url: DATABASE_URL, timeout: timeoutMs });
  const reconnects = { count: 0 };
  const reconnect = client.reconnect.bind(client);
  client.reconnect = () => {
    reconnects.count += 1;
    reconnect();
  };
  Object.assign(globalThis, { stackyardConnection: { client, db: drizzle(client), tail: Promise.resolve() } });
  return reconnects;
}

async function startSecondWriter(): Promise<{ process: ChildProcess; output: () => string }> {
  const child = spawn(
    process.execPath,
    ["--import", "tsx", "--conditions=react-server", path.join(ROOT, "tests/support/second-writer.ts")],
    { cwd: ROOT, env: { ...process.env, STORAGE_DIR: storageDir }, stdio: ["ignore", "pipe", "inherit"] },
  );
  let output = "";
  child.stdout.setEncoding("utf8").on("data", (text: string) => (output += text));
  await once(child.stdout, "data"); // it writes now
  return { process: child, output: () => output };
}

async function countRows(): Promise<Record<string, unknown>> {
  const reader = createClient({ url: DATABASE_URL });
  const { rows } = await reader.execute("select writer, count(*) as n from probe group by writer");
  reader.close();
  return Object.fromEntries(rows.map((row) => [String(row.writer), row.n]));
}
