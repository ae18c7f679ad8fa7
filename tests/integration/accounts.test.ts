// Before anything that reads cookies.
import { makePerson, PASSWORD, presentCookie, signInAs, signOut } from "../support/people";
import { setTimeout as delay } from "node:timers/promises";
import { verify } from "@node-rs/argon2";
import { count, eq } from "drizzle-orm";
import { encode } from "next-auth/jwt";
import { afterEach, expect, test, vi } from "vitest";
import { database, writeTransaction } from "@/db/client";
import { sessions, signInFailures, users } from "@/db/schema/accounts";
import { findSession } from "@/lib/auth/session";
import { createSession } from "@/lib/auth/sessions";
import { FAILURES_MOST, FAILURE_WINDOW_MS, tryPassword } from "@/lib/auth/sign-in";
import { sessionIdSchema } from "@/lib/ids";
import { countAccounts, isFirstAccountOpen, listSessions } from "@/lib/people/reads";
import { newAccountSchema } from "@/lib/people/schema";
import {
  changePassword,
  createAccount,
  createFirstAccount,
  disableAccount,
  endOtherSessions,
  endSession,
  setPassword,
} from "@/lib/people/writes";
import { authSecret } from "@/lib/storage/auth-secret";
import { useDatabase } from "../support/database";

// The real one, with its calls counted.
vi.mock("@node-rs/argon2", { spy: true });

useDatabase();
afterEach(() => {
  vi.useRealTimers();
  signOut();
});

const ADDRESS = "198.51.100.7";
const NEW_PASSWORD = "pebble orchard kettle swan";
const account = (email: string) => newAccountSchema.parse({ email, name: "Ada Lane", password: PASSWORD });

async function requireSession() {
  const user = await findSession();
  if (!user) throw new Error("expected to be signed in");
  return user;
}

test("of two first accounts made at once one wins, and administers", async () => {
  const outcomes = await Promise.allSettled([
    createFirstAccount(account("one@example.org")),
    createFirstAccount(account("two@example.org")),
  ]);
  expect(outcomes.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
  const lost = outcomes.find((outcome) => outcome.status === "rejected");
  expect(lost?.reason).toMatchObject({ code: "conflict" });
  const rows = await database().select({ isAdministrator: users.isAdministrator }).from(users);
  expect(rows).toEqual([{ isAdministrator: true }]);
});

test("the demo's people do not close the first-account page, and never administer", async () => {
  await createAccount(account("demo@example.org"), { isDemo: true });
  expect(await isFirstAccountOpen()).toBe(true);
  await createFirstAccount(account("ada@example.org"));
  expect(await isFirstAccountOpen()).toBe(false);
  expect(await countAccounts()).toBe(1);
  const rows = await database().select({ email: users.email, isAdministrator: users.isAdministrator }).from(users);
  expect(rows).toEqual([
    { email: "demo@example.org", isAdministrator: false },
    { email: "ada@example.org", isAdministrator: true },
  ]);
});

test("an e-mail has one account, whatever its case", async () => {
  await createAccount(account("ada@example.org"));
  await expect(createAccount(account(" Ada@Example.ORG "))).rejects.toMatchObject({ code: "conflict" });
});

test.each([
  "",
  "ada",
  "ada@",
  "@example.org",
  "a b@example.org",
  `${"a".repeat(250)}@example.org`,
  "ada@example.org\n@x",
])("%j is no e-mail", (email) => {
  expect(newAccountSchema.safeParse({ email, name: "Ada", password: PASSWORD }).success).toBe(false);
});

test("passwords are stored as argon2id with OWASP's parameters, each with its own salt", async () => {
  // OWASP Password Storage Cheat Sheet (from memory): argon2id, m = 19 MiB, t = 2, p = 1. PHC string format.
  await createAccount(account("one@example.org"));
  await createAccount(account("two@example.org"));
  const hashes = (await database().select({ hash: users.passwordHash }).from(users)).map(({ hash }) => hash);
  for (const hash of hashes) expect(hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  expect(new Set(hashes).size).toBe(2);
});

test("the same password typed in another Unicode form is right", async () => {
  // Unicode Standard Annex 15: é is U+00E9, or e and U+0301; NFKC makes them the same.
  const composed = "caf\u00E9 lantern violet spoon";
  await createAccount(newAccountSchema.parse({ email: "ada@example.org", name: "Ada", password: composed }));
  const password = "cafe\u0301 lantern violet spoon";
  expect(await tryPassword({ email: "ada@example.org", password, address: ADDRESS })).toMatchObject({ kind: "right" });
});

test("after ten wrong passwords the right one has to wait, from that address, for a quarter of an hour", async () => {
  vi.useFakeTimers({ toFake: ["Date"] });
  const { email } = await makePerson("Ada");
  const wrong = { email, password: "wrong", address: ADDRESS };
  const right = { email, password: PASSWORD, address: ADDRESS };
  for (let n = 0; n < 9; n++) expect(await tryPassword(wrong)).toEqual({ kind: "wrong" });
  // Right ones neither count nor reset.
  for (let n = 0; n < 3; n++) expect(await tryPassword(right)).toMatchObject({ kind: "right" });
  expect(await tryPassword(wrong)).toEqual({ kind: "wrong" });
  expect(await tryPassword(right)).toMatchObject({ kind: "wait", seconds: 900 });
  expect(await tryPassword({ ...right, address: "198.51.100.8" })).toMatchObject({ kind: "right" });
  vi.setSystemTime(Date.now() + FAILURE_WINDOW_MS - 1000);
  expect(await tryPassword(right)).toMatchObject({ kind: "wait", seconds: 1 });
  vi.setSystemTime(Date.now() + 1001);
  expect(await tryPassword(right)).toMatchObject({ kind: "right" });
});

test("thirty guesses at once are ten guesses", async () => {
  const { email } = await makePerson("Ada");
  const guesses = Array.from({ length: 30 }, (_, n) =>
    tryPassword({ email, password: `guess ${n}`, address: ADDRESS }),
  );
  const kinds = (await Promise.all(guesses)).map(({ kind }) => kind);
  expect(kinds.filter((kind) => kind === "wrong")).toHaveLength(FAILURES_MOST);
  expect(kinds.filter((kind) => kind === "wait")).toHaveLength(20);
});

test("twenty right ones at once are all let in", async () => {
  const { email } = await makePerson("Ada");
  const tries = Array.from({ length: 20 }, () => tryPassword({ email, password: PASSWORD, address: ADDRESS }));
  expect((await Promise.all(tries)).every(({ kind }) => kind === "right")).toBe(true);
});

test("an unknown e-mail is refused like a wrong password, counted, and costs the same hash", async () => {
  const { email } = await makePerson("Ada");
  // The cost stands before the salt of a PHC string; all else of an attempt is small beside it.
  const costOf = (stored: unknown) => String(stored).split("$").slice(1, 4).join("$");
  const costs: string[][] = [];
  for (const address of [email, "no@example.org"]) {
    vi.mocked(verify).mockClear();
    expect(await tryPassword({ email: address, password: "wrong", address: ADDRESS })).toEqual({ kind: "wrong" });
    costs.push(vi.mocked(verify).mock.calls.map(([stored]) => costOf(stored)));
  }
  expect(costs[0]).toEqual(["argon2id$v=19$m=19456,t=2,p=1"]);
  expect(costs[1]).toEqual(costs[0]);
  const [row] = await database().select({ n: count() }).from(signInFailures);
  expect(row?.n).toBe(2);
});

test("failures older than the window are forgotten", async () => {
  vi.useFakeTimers({ toFake: ["Date"] });
  await tryPassword({ email: "no@example.org", password: "wrong", address: ADDRESS });
  vi.setSystemTime(Date.now() + FAILURE_WINDOW_MS + 1);
  await tryPassword({ email: "other@example.org", password: "wrong", address: ADDRESS });
  const rows = await database().select({ email: signInFailures.email }).from(signInFailures);
  expect(rows).toEqual([{ email: "other@example.org" }]);
});

test("a session ends after thirty days", async () => {
  const person = await makePerson("Ada");
  await signInAs(person);
  vi.useFakeTimers({ toFake: ["Date"] });
  vi.setSystemTime(Date.now() + 30 * 24 * 60 * 60 * 1000 - 60_000);
  expect(await findSession()).toMatchObject({ email: person.email });
  vi.setSystemTime(Date.now() + 120_000);
  expect(await findSession()).toBeNull();
});

test("a cookie signed with another secret, or without a session id, is no session", async () => {
  const person = await makePerson("Ada");
  const sessionId = await createSession(person.id, "");
  presentCookie(await encode({ token: { sessionId }, secret: "another secret of enough length" }));
  expect(await findSession()).toBeNull();
  presentCookie(await encode({ token: { sub: person.id, email: person.email }, secret: authSecret() }));
  expect(await findSession()).toBeNull();
  presentCookie(await encode({ token: { sessionId }, secret: authSecret() }));
  expect(await findSession()).toMatchObject({ id: person.id });
});

test("a new password ends every other sign-in of the account at once, and nobody else's", async () => {
  const ada = await makePerson("Ada");
  const bo = await makePerson("Bo");
  const phone = await signInAs(ada);
  const other = await signInAs(bo);
  const here = await signInAs(ada);
  await changePassword(await requireSession(), { current: PASSWORD, next: NEW_PASSWORD, address: ADDRESS });
  expect(await findSession()).toMatchObject({ id: ada.id });
  presentCookie(phone);
  expect(await findSession()).toBeNull();
  presentCookie(other);
  expect(await findSession()).toMatchObject({ id: bo.id });
  presentCookie(here);
  expect(await findSession()).not.toBeNull();
  expect(await tryPassword({ email: ada.email, password: PASSWORD, address: ADDRESS })).toEqual({ kind: "wrong" });
  expect(await tryPassword({ email: ada.email, password: NEW_PASSWORD, address: ADDRESS })).toMatchObject({
    kind: "right",
  });
});

test("a new password needs the current one, and guesses at it are counted", async () => {
  await signInAs(await makePerson("Ada"));
  const user = await requireSession();
  const change = { current: "guess", next: NEW_PASSWORD, address: ADDRESS };
  for (let n = 0; n < FAILURES_MOST; n++) {
    await expect(changePassword(user, change)).rejects.toMatchObject({
      code: "invalid",
      fields: [{ field: "current" }],
    });
  }
  await expect(changePassword(user, { ...change, current: PASSWORD })).rejects.toMatchObject({
    code: "too_many_attempts",
    message: expect.stringContaining("15 minutes"),
  });
});

test("a common or short new password is refused before the current one is looked at", async () => {
  await signInAs(await makePerson("Ada"));
  const user = await requireSession();
  for (const next of ["too short", "passwordpassword"]) {
    await expect(changePassword(user, { current: "guess", next, address: ADDRESS })).rejects.toMatchObject({
      fields: [{ field: "next" }],
    });
  }
  const [row] = await database().select({ n: count() }).from(signInFailures);
  expect(row?.n).toBe(0);
});

test("a password set from the command line ends every sign-in", async () => {
  const ada = await makePerson("Ada");
  await signInAs(ada);
  await setPassword(ada.email, NEW_PASSWORD);
  expect(await findSession()).toBeNull();
});

test("disabling ends every sign-in, and the right password no longer lets in", async () => {
  const ada = await makePerson("Ada");
  await signInAs(ada);
  await disableAccount(ada.email);
  expect(await findSession()).toBeNull();
  expect(await tryPassword({ email: ada.email, password: PASSWORD, address: ADDRESS })).toEqual({ kind: "wrong" });
});

test("one's own sign-ins are listed and ended, never somebody else's", async () => {
  const ada = await makePerson("Ada");
  const bo = await makePerson("Bo");
  const boSession = await createSession(bo.id, "Bo's browser");
  const phone = await createSession(ada.id, "phone".repeat(100));
  await signInAs(ada);
  const user = await requireSession();
  const listed = await listSessions(user);
  expect(listed.map(({ isThisOne }) => isThisOne).sort()).toEqual([false, true]);
  expect(listed.find(({ id }) => id === phone)?.device).toHaveLength(200);
  await endSession(user, boSession);
  await endOtherSessions(user);
  const rows = await database().select({ id: sessions.id }).from(sessions);
  expect(rows.map(({ id }) => id).sort()).toEqual([boSession, user.sessionId].sort());
});

test("when a session was last seen is kept to ten minutes, not written at every request", async () => {
  const ada = await makePerson("Ada");
  await signInAs(ada);
  const { sessionId } = await requireSession();
  const seen = async () => {
    const [row] = await database()
      .select({ atMs: sessions.lastSeenAtMs })
      .from(sessions)
      .where(eq(sessions.id, sessionIdSchema.parse(sessionId)));
    return row?.atMs ?? 0;
  };
  const first = await seen();
  await delay(5);
  await findSession();
  expect(await seen()).toBe(first);
  await writeTransaction((tx) => tx.update(sessions).set({ lastSeenAtMs: first - 11 * 60 * 1000 }));
  await findSession();
  expect(await seen()).toBeGreaterThanOrEqual(first);
});
