import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, mkdtempSync, readFileSync, renameSync, rmSync, statSync, symlinkSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { createClient } from "@libsql/client";
import { afterAll, beforeEach, expect, test } from "vitest";
import { makePerson, makeProject, signInAs } from "../support/people";
import { useDatabase } from "../support/database";
import { idOf, uploadFile } from "../support/uploads";
import { authSecret } from "@/lib/storage/auth-secret";

const storageDir = useDatabase();
const ROOT = path.resolve(import.meta.dirname, "../..");
const BYTES = Buffer.from("what a camera wrote");

const outside = mkdtempSync(path.join(tmpdir(), "stackyard-backup-"));
afterAll(() => rmSync(outside, { recursive: true }));

let target: string;
let uploadId: string;

beforeEach(async () => {
  target = path.join(mkdtempSync(path.join(outside, "to-")), "monday");
  const lead = await makePerson("Lena Lead");
  await signInAs(lead);
  uploadId = idOf(await uploadFile(await makeProject(lead), "HARB0001.JPG", BYTES));
});

/** As `npm run --silent backup -- DIR` runs it, while this process has the database open. */
function backUp(storage = storageDir) {
  const args = ["--import", "tsx", "--conditions=react-server", "scripts/backup.ts", target];
  const env = { ...process.env, STORAGE_DIR: storage };
  const { status, stdout, stderr } = spawnSync(process.execPath, args, { cwd: ROOT, env, encoding: "utf8" });
  return { status, stdout, stderr };
}

test("database, originals and secret are copied while the product runs, for their owner alone", async () => {
  authSecret();
  expect(backUp()).toMatchObject({ status: 0, stderr: "" });
  expect(readFileSync(path.join(target, "originals", uploadId))).toEqual(BYTES);
  expect(readFileSync(path.join(target, "auth-secret"), "utf8")).toBe(authSecret());
  expect(statSync(target).mode & 0o777).toBe(0o700);
  const copy = createClient({ url: `file:${path.join(target, "stackyard.db")}` });
  expect((await copy.execute("select upload_id from files")).rows).toMatchObject([{ upload_id: uploadId }]);
  copy.close();
  expect(backUp()).toMatchObject({ status: 2, stderr: expect.stringContaining("is not empty") });
});

test("originals behind a symbolic link are copied too", () => {
  const originals = path.join(storageDir, "originals");
  const elsewhere = path.join(path.dirname(target), "larger-disk");
  renameSync(originals, elsewhere);
  symlinkSync(elsewhere, originals);
  try {
    expect(backUp()).toMatchObject({ status: 0 });
    expect(readFileSync(path.join(target, "originals", uploadId))).toEqual(BYTES);
  } finally {
    rmSync(originals);
    mkdirSync(originals);
  }
});

test("a folder without a database is refused: its copy would look like a backup", () => {
  const empty = path.join(path.dirname(target), "empty");
  expect(backUp(empty)).toMatchObject({ status: 2, stderr: expect.stringContaining("There is no database at") });
  expect([empty, target].map(existsSync)).toEqual([false, false]);
});
