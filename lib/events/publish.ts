import "server-only";
import type { Transaction } from "@/db/client";
import { events } from "@/db/schema/board";
import type { ProjectEvent } from "@/lib/events/schema";
import type { ProjectId } from "@/lib/ids";

/** Tells open pages what happened, in the transaction that makes it happen: nobody hears of what was rolled back. */
export async function publish(tx: Transaction, projectId: ProjectId, event: ProjectEvent, atMs: number): Promise<void> {
  const { type, ...payload } = event;
  await tx.insert(events).values({ projectId, type, payload, atMs });
}
