import "server-only";
import { lt } from "drizzle-orm";
import { type Transaction, writeTransaction } from "@/db/client";
import { events } from "@/db/schema/board";
import type { ProjectEvent } from "@/lib/events/schema";
import type { ProjectId } from "@/lib/ids";

/** Tells open pages what happened, in the transaction that makes it happen: nobody hears of what was rolled back. */
export async function publish(tx: Transaction, projectId: ProjectId, event: ProjectEvent, atMs: number): Promise<void> {
  const { type, ...payload } = event;
  await tx.insert(events).values({ projectId, type, payload, atMs });
}

/** A page that was away longer than this is told that it missed something, and fetches everything anew. */
const KEPT_MS = 24 * 60 * 60 * 1000;

/** Clears events that nobody will ask for any more. */
export async function pruneEvents(nowMs: number): Promise<void> {
  await writeTransaction((tx) => tx.delete(events).where(lt(events.atMs, nowMs - KEPT_MS)));
}
