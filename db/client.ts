import "server-only";
import { mkdirSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { createClient, type Client } from "@libsql/client";
import { drizzle, type LibSQLDatabase } from "drizzle-orm/libsql";
import { environment } from "@/lib/env";

export type Database = LibSQLDatabase;
export type Transaction = Parameters<Parameters<Database["transaction"]>[0]>[0];

/** How long a statement waits for another process's write, ms. Longest wait seen under two writers: 1.75 s. */
const BUSY_TIMEOUT_MS = 15_000;
const BUSY_TRIES = 5;

interface Connection {
  readonly client: Client;
  readonly db: Database;
  /** Tail of the queue of writes. */
  tail: Promise<unknown>;
}

// Next loads server modules more than once (pages, routes, instrumentation): one connection a process all the same.
const holder: { stackyardConnection?: Connection } = globalThis as object;

function connection(): Connection {
  holder.stackyardConnection ??= connect(environment().databaseUrl);
  return holder.stackyardConnection;
}

function connect(url: string): Connection {
  if (url.startsWith("file:")) mkdirSync(path.dirname(databaseFile(url)), { recursive: true });
  const client = createClient({ url, timeout: BUSY_TIMEOUT_MS });
  return { client, db: drizzle(client), tail: Promise.resolve() };
}

/** Where a `file:` database lies. */
export function databaseFile(url: string): string {
  return url.startsWith("file://") ? fileURLToPath(url) : url.slice("file:".length);
}

/** The database, for reads. Every write goes through `writeTransaction`. */
export function database(): Database {
  return connection().db;
}

/** Closes this process's connection; the next call opens a new one. */
export async function closeDatabase(): Promise<void> {
  const open = holder.stackyardConnection;
  if (!open) return;
  await open.tail;
  open.client.close();
  delete holder.stackyardConnection;
}

/**
 * Runs `work` in one write transaction (BEGIN IMMEDIATE), after every write queued before it in this process: two open
 * at once would block the event loop until they fail. Await nothing but SQL on `tx` inside. `work` may run again after
 * SQLITE_BUSY. A connection that has met SQLITE_BUSY reports later writes as done and never commits them, so it is
 * reconnected before the next try.
 */
export function writeTransaction<Result>(work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  const current = connection();
  const result = current.tail.then(() => runMended(current, work));
  current.tail = result.catch(() => undefined);
  return result;
}

async function runMended<Result>(current: Connection, work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await current.db.transaction(work);
    } catch (error) {
      if (!isBusy(error)) throw error;
      current.client.reconnect();
      if (attempt >= BUSY_TRIES) throw error;
    }
  }
}

function isBusy(error: unknown): boolean {
  for (let cause = error; cause instanceof Error; cause = cause.cause) {
    if ("code" in cause && typeof cause.code === "string" && cause.code.startsWith("SQLITE_BUSY")) return true;
  }
  return false;
}
