import { execFile } from "node:child_process";
import { readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import path from "node:path";
import { promisify } from "node:util";
import { expect, test } from "vitest";
import { readOrMake } from "@/lib/storage/auth-secret";
import { useDatabase } from "../support/database";

const storageDir = useDatabase();
const ROOT = path.resolve(import.meta.dirname, "../..");
const FILE = path.join(storageDir, "auth-secret");

test("three processes starting together have one secret, kept for the owner only", async () => {
  const script = `import { authSecret } from "./lib/storage/auth-secret"; process.stdout.write(authSecret());`;
  const options = ["--import", "tsx", "--conditions=react-server", "--input-type=module", "-e", script];
  const env = { ...process.env, STORAGE_DIR: storageDir, AUTH_SECRET: "" };
  const starts = Array.from({ length: 3 }, () => promisify(execFile)(process.execPath, options, { cwd: ROOT, env }));
  const secrets = (await Promise.all(starts)).map(({ stdout }) => stdout);
  expect(new Set(secrets)).toEqual(new Set([readFileSync(FILE, "utf8")]));
  // 32 random bytes in base64url.
  expect(secrets[0]).toMatch(/^[A-Za-z0-9_-]{43}$/);
  expect(statSync(FILE).mode & 0o777).toBe(0o600);
  expect(readdirSync(storageDir).filter((name) => name.startsWith("auth-secret"))).toEqual(["auth-secret"]);
});

test("the secret of an earlier start stays", () => {
  const first = readOrMake(FILE);
  expect(readOrMake(FILE)).toBe(first);
});

test("a file that is cut short is not used as a secret", () => {
  writeFileSync(FILE, "");
  expect(() => readOrMake(FILE)).toThrow(/too short/);
});
