import "server-only";
import { and, eq, gt, inArray, lte } from "drizzle-orm";
import { database, type Transaction, writeTransaction } from "@/db/client";
import { sessions } from "@/db/schema/accounts";
import { presences } from "@/db/schema/board";
import type { ProjectAccess, SignedInUser } from "@/lib/auth/gate";
import { AppError } from "@/lib/errors/app-error";
import { publish } from "@/lib/events/publish";
import type { ProjectId, SessionId } from "@/lib/ids";
import { presentPeople, selectPresences, SILENT_MS } from "@/lib/presence/reads";

/** One session's word is written down so often at most, ms, unless it is another tile. */
const WRITE_EVERY_MS = 2000;

/**
 * Notes that somebody has the board open, and on which tile. Others hear of it only where something changed: somebody
 * came, went, or is on another tile.
 * @throws AppError unauthenticated where the session ended meanwhile
 */
export async function notePresence(
  { projectId }: ProjectAccess,
  user: Pick<SignedInUser, "id" | "sessionId">,
  tile: string | null,
  nowMs: number,
): Promise<void> {
  if (await isNoted(projectId, user.sessionId, tile, nowMs)) return;
  await writeTransaction((tx) =>
    tellingOfChanges(tx, projectId, nowMs, async () => {
      const [session] = await tx.select({ id: sessions.id }).from(sessions).where(eq(sessions.id, user.sessionId));
      if (!session) throw new AppError("unauthenticated", "Sign in first.");
      await tx
        .insert(presences)
        .values({ projectId, sessionId: user.sessionId, userId: user.id, tile, seenAtMs: nowMs })
        .onConflictDoUpdate({
          target: [presences.projectId, presences.sessionId],
          set: { tile, seenAtMs: nowMs },
        });
    }),
  );
}

async function isNoted(projectId: ProjectId, sessionId: SessionId, tile: string | null, nowMs: number) {
  const ofSession = and(eq(presences.projectId, projectId), eq(presences.sessionId, sessionId));
  const [row] = await database()
    .select({ tile: presences.tile })
    .from(presences)
    .where(and(ofSession, gt(presences.seenAtMs, nowMs - WRITE_EVERY_MS)));
  return row !== undefined && row.tile === tile;
}

/** Takes a session off one board: its page was left or closed. Another tab of it says again within seconds that it is here. */
export async function leaveBoard(
  { projectId }: ProjectAccess,
  { sessionId }: Pick<SignedInUser, "sessionId">,
  nowMs: number,
): Promise<void> {
  await writeTransaction((tx) =>
    tellingOfChanges(tx, projectId, nowMs, async () => {
      await tx.delete(presences).where(and(eq(presences.projectId, projectId), eq(presences.sessionId, sessionId)));
    }),
  );
}

/** Clears whoever has gone without a word, and tells the others. For the worker, every minute. */
export async function prunePresences(nowMs: number): Promise<void> {
  const rows = await database()
    .selectDistinct({ projectId: presences.projectId })
    .from(presences)
    .where(isSilent(nowMs));
  for (const { projectId } of rows) {
    await writeTransaction((tx) => tellingOfChanges(tx, projectId, nowMs, () => Promise.resolve()));
  }
}

/** Takes sessions that end off every board that they had open. */
export async function leaveBoards(tx: Transaction, sessionIds: readonly SessionId[], nowMs: number): Promise<void> {
  if (sessionIds.length === 0) return;
  const left = await tx
    .delete(presences)
    .where(inArray(presences.sessionId, [...sessionIds]))
    .returning({ projectId: presences.projectId });
  for (const projectId of new Set(left.map((row) => row.projectId))) {
    await publish(tx, projectId, { type: "people.moved" }, nowMs);
  }
}

async function tellingOfChanges(
  tx: Transaction,
  projectId: ProjectId,
  nowMs: number,
  change: () => Promise<void>,
): Promise<void> {
  const before = presentPeople(await selectPresences(tx, projectId));
  await tx.delete(presences).where(and(eq(presences.projectId, projectId), isSilent(nowMs)));
  await change();
  const after = presentPeople(await selectPresences(tx, projectId));
  if (JSON.stringify(before) === JSON.stringify(after)) return;
  await publish(tx, projectId, { type: "people.moved" }, nowMs);
}

function isSilent(nowMs: number) {
  return lte(presences.seenAtMs, nowMs - SILENT_MS);
}
