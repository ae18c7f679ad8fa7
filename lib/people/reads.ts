import "server-only";
import { asc, count, desc, eq, gt, and } from "drizzle-orm";
import { database } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import type { SignedInUser } from "@/lib/auth/gate";
import type { SessionId, UserId } from "@/lib/ids";

/**
 * Whether the first-account page is open: while nobody but the demo's people has an account. Whoever makes it
 * administers the installation; the demo's accounts, whose passwords are on the sign-in page, never do.
 */
export async function isFirstAccountOpen(): Promise<boolean> {
  return (await countAccounts()) === 0;
}

/** Accounts of people; the demo's are not counted. */
export async function countAccounts(): Promise<number> {
  const [row] = await database().select({ accounts: count() }).from(users).where(eq(users.isDemo, false));
  return row?.accounts ?? 0;
}

export interface SessionSummary {
  readonly id: SessionId;
  readonly device: string;
  readonly createdAtMs: number;
  readonly lastSeenAtMs: number;
  /** The one that asks. */
  readonly isThisOne: boolean;
}

/** Where the person is signed in, the latest seen first. */
export async function listSessions(user: SignedInUser): Promise<SessionSummary[]> {
  const rows = await database()
    .select({
      id: sessions.id,
      device: sessions.device,
      createdAtMs: sessions.createdAtMs,
      lastSeenAtMs: sessions.lastSeenAtMs,
    })
    .from(sessions)
    .where(and(eq(sessions.userId, user.id), gt(sessions.expiresAtMs, Date.now())))
    .orderBy(desc(sessions.lastSeenAtMs), asc(sessions.id));
  return rows.map((row) => ({ ...row, isThisOne: row.id === user.sessionId }));
}

export interface DemoAccount {
  readonly email: string;
  readonly name: string;
}

/** For the sign-in page: the demo's people, only while they exist. */
export async function listDemoAccounts(): Promise<DemoAccount[]> {
  return database()
    .select({ email: users.email, name: users.name })
    .from(users)
    .where(eq(users.isDemo, true))
    .orderBy(asc(users.createdAtMs), asc(users.email));
}

export interface AccountSummary {
  readonly id: UserId;
  readonly email: string;
  readonly name: string;
  readonly isAdministrator: boolean;
  readonly isDemo: boolean;
  readonly disabledAtMs: number | null;
  readonly createdAtMs: number;
}

/** Every account of the installation: for its administrator and the command line. */
export async function listAccounts(): Promise<AccountSummary[]> {
  return database()
    .select({
      id: users.id,
      email: users.email,
      name: users.name,
      isAdministrator: users.isAdministrator,
      isDemo: users.isDemo,
      disabledAtMs: users.disabledAtMs,
      createdAtMs: users.createdAtMs,
    })
    .from(users)
    .orderBy(asc(users.createdAtMs), asc(users.id));
}
