/** The second process of tests/integration/database.test.ts: writes through the same queue for two seconds. */
import { setTimeout as delay } from "node:timers/promises";
import { sql } from "drizzle-orm";
import { closeDatabase, writeTransaction } from "@/db/client";

const DURATION_MS = 2000;
const HOLD_MS = 40;
const PAUSE_MS = 2;

let acknowledged = 0;
const until = Date.now() + DURATION_MS;
while (Date.now() < until) {
  const holds = acknowledged % 10 === 0;
  await writeTransaction(async (tx) => {
    await tx.run(sql`insert into probe values ('other', ${acknowledged})`);
    if (holds) await delay(HOLD_MS);
  });
  if (acknowledged === 0) console.log("writing");
  acknowledged += 1;
  // SQLite's waiting is not fair: writing without a pause would keep the other out.
  await delay(PAUSE_MS);
}
await closeDatabase();
console.log(`acknowledged ${acknowledged}`);
