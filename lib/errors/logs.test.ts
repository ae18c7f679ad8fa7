import { DrizzleQueryError } from "drizzle-orm/errors";
import { inspect } from "node:util";
import { afterEach, expect, test, vi } from "vitest";
import { keepParametersOutOfLogs, withoutParameters } from "@/lib/errors/logs";

const SECRETS = ["mona@yard.example", "$argon2id$v=19$hash"];

function failedQuery(): Error {
  const query = "insert into users (email, password_hash) values (?, ?)";
  return new DrizzleQueryError(query, SECRETS, new Error("SQLITE_CONSTRAINT: users.email"));
}

function expectNoSecret(text: string): void {
  for (const secret of SECRETS) expect(text).not.toContain(secret);
  expect(text).toContain("insert into users (email, password_hash)");
  expect(text).toContain("SQLITE_CONSTRAINT: users.email");
}

afterEach(() => vi.restoreAllMocks());

test("a failed query is told without the values that were bound, whatever wraps it", () => {
  const plain = failedQuery();
  // What it is about: as it comes, it tells them.
  expect(inspect(plain)).toContain(SECRETS[0]);
  expectNoSecret(inspect(withoutParameters(plain)));
  expectNoSecret(inspect(withoutParameters(new Error("the account was not made", { cause: failedQuery() }))));
  expect(withoutParameters("text")).toBe("text");
});

test("a process that asked for it logs no bound values", () => {
  const told: unknown[][] = [];
  const before = { error: console.error, warn: console.warn, log: console.log };
  for (const method of ["error", "warn", "log"] as const) {
    vi.spyOn(console, method).mockImplementation((...values: unknown[]) => void told.push(values));
  }
  keepParametersOutOfLogs();
  console.error("request 1 failed", failedQuery());
  Object.assign(console, before);
  expect(told).toHaveLength(1);
  expectNoSecret(inspect(told));
});
