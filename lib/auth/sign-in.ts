import "server-only";
import { and, asc, eq, gt, lte } from "drizzle-orm";
import { database, writeTransaction } from "@/db/client";
import { signInFailures, users } from "@/db/schema/accounts";
import { verifyPassword } from "@/lib/auth/password-hash";
import type { UserId } from "@/lib/ids";

/** interfaces: 10 failures per account and address within 15 minutes, then a wait. */
export const FAILURES_MOST = 10;
export const FAILURE_WINDOW_MS = 15 * 60 * 1000;

export interface PasswordAttempt {
  /** Lower case, as stored. */
  readonly email: string;
  readonly password: string;
  readonly address: string;
}

export type PasswordOutcome =
  | { readonly kind: "right"; readonly userId: UserId; readonly name: string }
  | { readonly kind: "wrong" }
  | { readonly kind: "wait"; readonly seconds: number };

// Next loads server modules more than once: one set of queues a process all the same.
const holder: { stackyardAttempts?: Map<string, Promise<unknown>> } = globalThis as object;

/**
 * Checks a password and counts the failure. Attempts on one account from one address are taken one after another:
 * a hundred at once get ten tries, and right ones are never counted, not even while they are looked at.
 */
export function tryPassword(attempt: PasswordAttempt): Promise<PasswordOutcome> {
  const queues = (holder.stackyardAttempts ??= new Map());
  const key = JSON.stringify([attempt.email, attempt.address]);
  const result = (queues.get(key) ?? Promise.resolve()).then(() => tryOne(attempt));
  const tail: Promise<unknown> = result
    .catch(() => undefined)
    .then(() => {
      if (queues.get(key) === tail) queues.delete(key);
    });
  queues.set(key, tail);
  return result;
}

async function tryOne({ email, password, address }: PasswordAttempt): Promise<PasswordOutcome> {
  const seconds = await secondsToWait(email, address, Date.now());
  if (seconds > 0) return { kind: "wait", seconds };
  const [user] = await database()
    .select({ id: users.id, name: users.name, hash: users.passwordHash, disabledAtMs: users.disabledAtMs })
    .from(users)
    .where(eq(users.email, email));
  const isRight = await verifyPassword(user?.hash ?? null, password);
  if (user && isRight && user.disabledAtMs === null) return { kind: "right", userId: user.id, name: user.name };
  await recordFailure(email, address, Date.now());
  return { kind: "wrong" };
}

async function secondsToWait(email: string, address: string, nowMs: number): Promise<number> {
  const recent = await database()
    .select({ atMs: signInFailures.atMs })
    .from(signInFailures)
    .where(
      and(
        eq(signInFailures.email, email),
        eq(signInFailures.address, address),
        gt(signInFailures.atMs, nowMs - FAILURE_WINDOW_MS),
      ),
    )
    .orderBy(asc(signInFailures.atMs));
  const oldestThatCounts = recent.at(-FAILURES_MOST);
  return oldestThatCounts ? Math.ceil((oldestThatCounts.atMs + FAILURE_WINDOW_MS - nowMs) / 1000) : 0;
}

async function recordFailure(email: string, address: string, nowMs: number): Promise<void> {
  await writeTransaction(async (tx) => {
    await tx.delete(signInFailures).where(lte(signInFailures.atMs, nowMs - FAILURE_WINDOW_MS));
    await tx.insert(signInFailures).values({ email, address, atMs: nowMs });
  });
}
