import "server-only";
import { and, count, eq } from "drizzle-orm";
import { database, writeTransaction, type Transaction } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import type { SignedInUser } from "@/lib/auth/gate";
import { hashPassword } from "@/lib/auth/password-hash";
import { passwordProblem } from "@/lib/auth/password-rules";
import { removeSessionsOf } from "@/lib/auth/sessions";
import { tryPassword } from "@/lib/auth/sign-in";
import { signInMessage, waitError } from "@/lib/auth/sign-in-message";
import { AppError } from "@/lib/errors/app-error";
import { newId, userIdSchema, type SessionId, type UserId } from "@/lib/ids";
import type { NewAccount } from "@/lib/people/schema";

/**
 * Makes an account.
 * @throws AppError conflict where the e-mail has one
 */
export async function createAccount(
  account: NewAccount,
  marks: { readonly isAdministrator?: boolean; readonly isDemo?: boolean } = {},
): Promise<UserId> {
  const passwordHash = await hashPassword(account.password);
  return writeTransaction((tx) => insertAccount(tx, { ...account, passwordHash, ...marks }));
}

/**
 * Makes the account of the installation's administrator, only while nobody but the demo's people has one. Of two at
 * once one wins: counting and making are one transaction.
 * @throws AppError conflict where there is one already
 */
export async function createFirstAccount(account: NewAccount): Promise<UserId> {
  const passwordHash = await hashPassword(account.password);
  return writeTransaction(async (tx) => {
    const [row] = await tx.select({ accounts: count() }).from(users).where(eq(users.isDemo, false));
    if (row?.accounts !== 0) {
      throw new AppError("conflict", "The first account exists already. Sign in, or ask its owner for an account.");
    }
    return insertAccount(tx, { ...account, passwordHash, isAdministrator: true });
  });
}

interface AccountRow {
  readonly email: string;
  readonly name: string;
  readonly passwordHash: string;
  readonly isAdministrator?: boolean;
  readonly isDemo?: boolean;
}

async function insertAccount(tx: Transaction, row: AccountRow): Promise<UserId> {
  const { email, name, passwordHash, isAdministrator = false, isDemo = false } = row;
  const id = userIdSchema.parse(newId());
  const made = await tx
    .insert(users)
    .values({ id, email, name, passwordHash, isAdministrator, isDemo, createdAtMs: Date.now() })
    .onConflictDoNothing({ target: users.email })
    .returning({ id: users.id });
  if (made.length === 0) throw new AppError("conflict", `There is an account for ${email} already.`);
  return id;
}

export async function changeName(user: SignedInUser, name: string): Promise<void> {
  await writeTransaction((tx) => tx.update(users).set({ name }).where(eq(users.id, user.id)));
}

export interface PasswordChange {
  readonly current: string;
  readonly next: string;
  /** Of the request, as for sign-in: wrong current passwords are counted with the failed sign-ins. */
  readonly address: string;
}

/**
 * A new password, given the current one; every other sign-in of the account ends.
 * @throws AppError invalid with the field `current` or `next`; too_many_attempts
 */
export async function changePassword(user: SignedInUser, change: PasswordChange): Promise<void> {
  const problem = passwordProblem(change.next, [user.email, user.name]);
  if (problem) throw fieldError("next", problem);
  const outcome = await tryPassword({ email: user.email, password: change.current, address: change.address });
  if (outcome.kind === "wait") throw new AppError("too_many_attempts", signInMessage(waitError(outcome.seconds)));
  if (outcome.kind === "wrong") throw fieldError("current", "This is not your current password.");
  await storePassword(user.id, change.next, user.sessionId);
}

function fieldError(field: string, message: string): AppError {
  return new AppError("invalid", message, { fields: [{ field, message }] });
}

/** A new password without the current one (command line); every sign-in of the account ends. */
export async function setPassword(email: string, password: string): Promise<void> {
  const user = await findByEmail(email);
  const problem = passwordProblem(password, [user.email, user.name]);
  if (problem) throw fieldError("password", problem);
  await storePassword(user.id, password);
}

async function storePassword(userId: UserId, password: string, except?: SessionId): Promise<void> {
  const passwordHash = await hashPassword(password);
  await writeTransaction(async (tx) => {
    await tx.update(users).set({ passwordHash }).where(eq(users.id, userId));
    await removeSessionsOf(tx, userId, except);
  });
}

/** Nobody can sign in with the account any more, and every sign-in of it ends; what it did stays. */
export async function disableAccount(email: string): Promise<void> {
  const user = await findByEmail(email);
  await writeTransaction(async (tx) => {
    await tx.update(users).set({ disabledAtMs: Date.now() }).where(eq(users.id, user.id));
    await removeSessionsOf(tx, user.id);
  });
}

/** Ends one of the person's own sign-ins; an id that is not theirs ends nothing. */
export async function endSession(user: SignedInUser, id: SessionId): Promise<void> {
  await writeTransaction((tx) => tx.delete(sessions).where(and(eq(sessions.id, id), eq(sessions.userId, user.id))));
}

export async function endOtherSessions(user: SignedInUser): Promise<void> {
  await writeTransaction((tx) => removeSessionsOf(tx, user.id, user.sessionId));
}

async function findByEmail(email: string): Promise<{ id: UserId; email: string; name: string }> {
  const [user] = await database()
    .select({ id: users.id, email: users.email, name: users.name })
    .from(users)
    .where(eq(users.email, email));
  if (!user) throw new AppError("not_found", `There is no account for ${email}.`);
  return user;
}
