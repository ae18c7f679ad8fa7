import { spawn } from "node:child_process";
import { once } from "node:events";
import { rmSync } from "node:fs";
import path from "node:path";
import { expect, test } from "vitest";
import { tryPassword } from "@/lib/auth/sign-in";
import { closeDatabase } from "@/db/client";
import { runUserCommand, UsageError } from "@/scripts/user/run";
import { useDatabase } from "../support/database";

const storageDir = useDatabase();
const ROOT = path.resolve(import.meta.dirname, "../..");
const PASSWORD = "harbour lantern violet spoon";

const ATTEMPT = { email: "ada@example.org", address: "198.51.100.7" };

interface Outcome {
  readonly code: number | null;
  readonly output: string;
  readonly errors: string;
}

/** As `npm run --silent user -- ...` runs it, with this on standard input. */
async function command(args: readonly string[], input = ""): Promise<Outcome> {
  const options = ["--import", "tsx", "--conditions=react-server", "scripts/user.ts", ...args];
  const child = spawn(process.execPath, options, { cwd: ROOT, env: { ...process.env, STORAGE_DIR: storageDir } });
  let output = "";
  let errors = "";
  child.stdout.setEncoding("utf8").on("data", (text: string) => (output += text));
  child.stderr.setEncoding("utf8").on("data", (text: string) => (errors += text));
  child.stdin.end(input);
  const [code] = await once(child, "close");
  return { code: typeof code === "number" ? code : null, output, errors };
}

test("as a command: made, then refused with one line and exit code 1, and used wrongly with 2", async () => {
  const made = await command(["add", "Ada@Example.org", "--name", "Ada Lane", "--admin"], `${PASSWORD}\n`);
  expect(made).toMatchObject({ code: 0, errors: "", output: expect.stringContaining("administers") });
  // Made beside this process, which has the database open.
  expect(await tryPassword({ ...ATTEMPT, password: PASSWORD })).toMatchObject({ kind: "right", name: "Ada Lane" });
  const refused = await command(["disable", "no@example.org"]);
  expect(refused).toEqual({ code: 1, output: "", errors: "There is no account for no@example.org.\n" });
  const wrong = await command(["remove", "ada@example.org"]);
  expect(wrong).toMatchObject({ code: 2, output: "", errors: expect.stringContaining("Usage") });
});

test("an account is listed, given a new password and disabled", async () => {
  await runUserCommand(["add", "ada@example.org", "--name", "Ada Lane", "--admin"], async () => PASSWORD);
  const listed = await runUserCommand(["list"], async () => "");
  expect(listed).toMatch(/^ada@example\.org +Ada Lane +\d{4}-\d\d-\d\d +administrator$/m);
  expect(listed).not.toContain("argon2");
  const next = "pebble orchard kettle swan";
  await runUserCommand(["password", "ada@example.org"], async () => next);
  expect(await tryPassword({ ...ATTEMPT, password: next })).toMatchObject({ kind: "right" });
  await runUserCommand(["disable", "ADA@example.org"], async () => "");
  expect(await tryPassword({ ...ATTEMPT, password: next })).toEqual({ kind: "wrong" });
  expect(await runUserCommand(["list"], async () => "")).toContain("administrator, disabled");
});

test("it migrates a database that is not there yet", async () => {
  await closeDatabase();
  for (const end of ["", "-wal", "-shm"]) rmSync(path.join(storageDir, `stackyard.db${end}`), { force: true });
  expect(await runUserCommand(["list"], async () => "")).toBe("There are no accounts yet.");
});

test.each([
  { args: ["password", "no@example.org"], input: PASSWORD, message: "There is no account for no@example.org." },
  { args: ["disable", "no@example.org"], input: "", message: "There is no account for no@example.org." },
  { args: ["add", "ada", "--name", "Ada"], input: PASSWORD, message: "this is not an e-mail address" },
  {
    args: ["add", "ada@example.org", "--name", " "],
    input: PASSWORD,
    message: "name: give at least one visible character",
  },
])("$args is refused in one line", async ({ args, input, message }) => {
  await expect(runUserCommand(args, async () => input)).rejects.toMatchObject({ name: "AppError", message });
});

test("a short or common password is refused in one line", async () => {
  for (const password of ["short", "passwordpassword"]) {
    const made = runUserCommand(["add", "ada@example.org", "--name", "Ada"], async () => password);
    await expect(made).rejects.toThrow(/^password: .+$/);
  }
});

test.each([
  { args: [] },
  { args: ["remove", "ada@example.org"] },
  { args: ["add"] },
  { args: ["add", "ada@example.org"] },
  { args: ["add", "ada@example.org", "--name", "Ada", "Lane"] },
  { args: ["list", "--everything"] },
  { args: ["disable", "ada@example.org", "--admin"] },
])("$args is a wrong command line", async ({ args }) => {
  await expect(runUserCommand(args, async () => PASSWORD)).rejects.toBeInstanceOf(UsageError);
});

test("an empty password is a wrong command line", async () => {
  const made = runUserCommand(["add", "ada@example.org", "--name", "Ada"], async () => "");
  await expect(made).rejects.toBeInstanceOf(UsageError);
});
