/** `npm run --silent user -- add|password|disable|list`: accounts from the command line, also while the product runs. */
import { parseArgs } from "node:util";
import { z } from "zod";
import { closeDatabase } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";
import { AppError } from "@/lib/errors/app-error";
import { listAccounts, type AccountSummary } from "@/lib/people/reads";
import { emailSchema, newAccountSchema } from "@/lib/people/schema";
import { createAccount, disableAccount, setPassword } from "@/lib/people/writes";

const USAGE = `Usage, with the password on standard input where one is needed:
  npm run --silent user -- add EMAIL --name NAME [--admin]
  npm run --silent user -- password EMAIL
  npm run --silent user -- disable EMAIL
  npm run --silent user -- list`;

/** The command line itself is wrong: exit code 2. Everything else that is refused: 1. */
class UsageError extends Error {}

interface Arguments {
  readonly command: string | undefined;
  readonly email: string | undefined;
  readonly name: string | undefined;
  readonly isAdministrator: boolean;
}

function readArguments(): Arguments {
  try {
    const { values, positionals } = parseArgs({
      options: { name: { type: "string" }, admin: { type: "boolean", default: false } },
      allowPositionals: true,
    });
    const [command, email, ...rest] = positionals;
    if (rest.length > 0) throw new UsageError(`“${rest.join(" ")}” is too much. Put a name with spaces in quotes.`);
    return { command, email, name: values.name, isAdministrator: values.admin };
  } catch (error) {
    if (error instanceof UsageError) throw error;
    throw new UsageError(error instanceof Error ? (error.message.split(". ")[0] ?? "") : String(error));
  }
}

async function run({ command, email, name, isAdministrator }: Arguments): Promise<string> {
  if (command === "list" && email === undefined) {
    await migrateDatabase();
    return formatAccounts(await listAccounts());
  }
  if (!["add", "password", "disable"].includes(command ?? "")) {
    throw new UsageError(command === undefined ? "Say what to do." : `There is no “${command}”.`);
  }
  if (email === undefined) throw new UsageError("Say whose account: the e-mail is missing.");
  if (command === "add" && name === undefined) throw new UsageError("Give the person's name: --name NAME.");
  if (command !== "add" && (name !== undefined || isAdministrator)) {
    throw new UsageError("--name and --admin belong to “add”.");
  }
  const address = parse(emailSchema, email);
  await migrateDatabase();
  if (command === "disable") {
    await disableAccount(address);
    return `${address} is disabled and signed out everywhere.`;
  }
  const password = await readPassword();
  if (command === "password") {
    await setPassword(address, password);
    return `${address} has a new password and is signed out everywhere.`;
  }
  await createAccount(parse(newAccountSchema, { email, name, password }), { isAdministrator });
  return `${address} can sign in${isAdministrator ? " and administers this installation" : ""}.`;
}

function parse<Value>(schema: z.ZodType<Value>, value: unknown): Value {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const messages = parsed.error.issues.map(({ path, message }) => [...path, message].join(": "));
  throw new AppError("invalid", messages.join("; "));
}

/** All of standard input but one line end at its end, which `echo` and the Enter key add. */
async function readPassword(): Promise<string> {
  if (process.stdin.isTTY) process.stderr.write("Password (it is shown while you type; then Enter and Ctrl-D): ");
  const chunks: Buffer[] = [];
  for await (const chunk of process.stdin) chunks.push(Buffer.from(chunk));
  const password = Buffer.concat(chunks)
    .toString("utf8")
    .replace(/\r?\n$/, "");
  if (password === "") throw new UsageError("Give the password on standard input.");
  return password;
}

function formatAccounts(accounts: readonly AccountSummary[]): string {
  if (accounts.length === 0) return "There are no accounts yet.";
  const lines = accounts.map(({ email, name, isAdministrator, isDemo, disabledAtMs, createdAtMs }) => {
    const marks = [isAdministrator && "administrator", isDemo && "demo", disabledAtMs !== null && "disabled"];
    return [email, name, new Date(createdAtMs).toISOString().slice(0, 10), marks.filter(Boolean).join(", ")];
  });
  const rows = [["E-MAIL", "NAME", "MADE", ""], ...lines];
  const widths = [0, 1, 2].map((column) => Math.max(...rows.map((row) => (row[column] ?? "").length)));
  return rows
    .map((row) =>
      row
        .map((cell, column) => cell.padEnd(widths[column] ?? 0))
        .join("  ")
        .trimEnd(),
    )
    .join("\n");
}

try {
  console.log(await run(readArguments()));
} catch (error) {
  // One clear line: a stack trace helps nobody at a prompt.
  console.error(error instanceof Error ? error.message : String(error));
  if (error instanceof UsageError) console.error(USAGE);
  process.exitCode = error instanceof UsageError ? 2 : 1;
} finally {
  await closeDatabase();
}
