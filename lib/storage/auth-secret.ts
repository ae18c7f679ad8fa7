import "server-only";
import { randomBytes } from "node:crypto";
import { linkSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import path from "node:path";
import { environment } from "@/lib/env";

let cached: { readonly dir: string; readonly secret: string } | undefined;

/** What signs the sessions: AUTH_SECRET, or 256 random bits made once and kept in the storage directory. */
export function authSecret(): string {
  const { authSecret: given, storageDir } = environment();
  if (given !== null) return given;
  if (cached?.dir !== storageDir) cached = { dir: storageDir, secret: readOrMake(path.join(storageDir, "auth-secret")) };
  return cached.secret;
}

/** Web and worker may start together: the file appears whole, by a hard link, and the first one stays. */
export function readOrMake(file: string): string {
  const existing = read(file);
  if (existing !== null) return existing;
  mkdirSync(path.dirname(file), { recursive: true });
  const draft = `${file}.${process.pid}-${randomBytes(6).toString("hex")}`;
  writeFileSync(draft, randomBytes(32).toString("base64url"), { mode: 0o600, flag: "wx", flush: true });
  try {
    linkSync(draft, file);
  } catch (error) {
    if (!hasCode(error, "EEXIST")) throw error;
  } finally {
    rmSync(draft, { force: true });
  }
  const made = read(file);
  if (made === null) throw new Error(`The secret could not be kept in ${file}: is the storage directory writable?`);
  return made;
}

function read(file: string): string | null {
  try {
    const text = readFileSync(file, "utf8").trim();
    if (text.length < 16) throw new Error(`${file} is too short to be a secret. Delete it; a new one is made.`);
    return text;
  } catch (error) {
    if (hasCode(error, "ENOENT")) return null;
    throw error;
  }
}

function hasCode(error: unknown, code: string): boolean {
  return error instanceof Error && "code" in error && error.code === code;
}
