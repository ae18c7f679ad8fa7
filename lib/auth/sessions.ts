import "server-only";
import { and, eq, lte, ne } from "drizzle-orm";
import { writeTransaction, type Transaction } from "@/db/client";
import { sessions } from "@/db/schema/accounts";
import { leaveBoards } from "@/lib/presence/writes";
import { newId, sessionIdSchema, type SessionId, type UserId } from "@/lib/ids";

/** NIST SP 800-63B (from memory): sign in again after 30 days at the lowest level of assurance. */
export const SESSION_SECONDS = 30 * 24 * 60 * 60;
/** Enough to tell browsers apart; user agents can be of any length. */
const DEVICE_CHARACTERS = 200;

export async function createSession(userId: UserId, device: string): Promise<SessionId> {
  const id = sessionIdSchema.parse(newId());
  const nowMs = Date.now();
  await writeTransaction(async (tx) => {
    await tx.delete(sessions).where(lte(sessions.expiresAtMs, nowMs));
    await tx.insert(sessions).values({
      id,
      userId,
      device: device.slice(0, DEVICE_CHARACTERS),
      createdAtMs: nowMs,
      lastSeenAtMs: nowMs,
      expiresAtMs: nowMs + SESSION_SECONDS * 1000,
    });
  });
  return id;
}

export async function removeSession(id: SessionId): Promise<void> {
  await writeTransaction(async (tx) => {
    await leaveBoards(tx, [id], Date.now());
    await tx.delete(sessions).where(eq(sessions.id, id));
  });
}

/** Ends every sign-in of an account, but for one if given. */
export async function removeSessionsOf(tx: Transaction, userId: UserId, except?: SessionId): Promise<void> {
  const others = except === undefined ? undefined : ne(sessions.id, except);
  const ending = and(eq(sessions.userId, userId), others);
  const rows = await tx.select({ id: sessions.id }).from(sessions).where(ending);
  await leaveBoards(
    tx,
    rows.map(({ id }) => id),
    Date.now(),
  );
  await tx.delete(sessions).where(ending);
}

export async function touchSession(id: SessionId, nowMs: number): Promise<void> {
  await writeTransaction((tx) => tx.update(sessions).set({ lastSeenAtMs: nowMs }).where(eq(sessions.id, id)));
}
