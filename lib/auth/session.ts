import "server-only";
import { and, eq, gt, isNull } from "drizzle-orm";
import { decode } from "next-auth/jwt";
import { cookies } from "next/headers";
import { database } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import type { SignedInUser } from "@/lib/auth/gate";
import { touchSession } from "@/lib/auth/sessions";
import { environment } from "@/lib/env";
import { sessionIdSchema, type SessionId } from "@/lib/ids";
import { authSecret } from "@/lib/storage/auth-secret";

/** How exact "last seen" is: a write for every request would be one for every preview. */
const SEEN_STEP_MS = 10 * 60 * 1000;

/** next-auth's own names: the prefix binds the cookie to HTTPS. */
export function sessionCookieName(): string {
  const isSecure = environment().appUrl.startsWith("https://");
  return isSecure ? "__Secure-next-auth.session-token" : "next-auth.session-token";
}

/**
 * The signed-in person of this request: the session id in the cookie, looked up in the database on every request, so
 * that sign-out, disabling and a new password end it everywhere. Null: no living session of an enabled account.
 */
export async function findSession(): Promise<SignedInUser | null> {
  const id = await sessionIdOf((await cookies()).get(sessionCookieName())?.value);
  return id === null ? null : findLiving(id);
}

async function findLiving(id: SessionId): Promise<SignedInUser | null> {
  const nowMs = Date.now();
  const [row] = await database()
    .select({
      id: users.id,
      email: users.email,
      name: users.name,
      isAdministrator: users.isAdministrator,
      lastSeenAtMs: sessions.lastSeenAtMs,
    })
    .from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.id, id), gt(sessions.expiresAtMs, nowMs), isNull(users.disabledAtMs)));
  if (!row) return null;
  if (nowMs - row.lastSeenAtMs > SEEN_STEP_MS) await touchSession(id, nowMs);
  return { id: row.id, sessionId: id, email: row.email, name: row.name, isAdministrator: row.isAdministrator };
}

async function sessionIdOf(cookie: string | undefined): Promise<SessionId | null> {
  if (!cookie) return null;
  try {
    const token = await decode({ token: cookie, secret: authSecret() });
    return sessionIdSchema.safeParse(token?.sessionId).data ?? null;
  } catch {
    // Forged, expired, or signed with an earlier secret: as good as no cookie.
    return null;
  }
}
