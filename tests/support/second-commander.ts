/**
 * The second process of tests/integration/many-commands.test.ts: two clients who give commands, and a worker that
 * writes, on the storage of the first. Prints what was acknowledged, as one line of JSON.
 */
import { closeDatabase } from "@/db/client";
import { giveCommands, type Giving, writeLikeWorker } from "./give-commands";

const giving = JSON.parse(process.argv[2] ?? "") as Giving;
console.log("giving");
const stop = new AbortController();
const written = writeLikeWorker(giving.projectId, stop.signal);
const acknowledged = await giveCommands(giving);
stop.abort();
const measured = await written;
await closeDatabase();
console.log(JSON.stringify({ acknowledged, measured }));
