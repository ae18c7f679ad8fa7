import { parseArgs } from "node:util";
import type { z } from "zod";
import { migrateDatabase } from "@/db/migrate";
import { AppError } from "@/lib/errors/app-error";
import { listAccounts, type AccountSummary } from "@/lib/people/reads";
import { emailSchema, newAccountSchema } from "@/lib/people/schema";
import { createAccount, disableAccount, setPassword } from "@/lib/people/writes";

/** The command line itself is wrong: exit code 2. Everything else that is refused: 1. */
export class UsageError extends Error {}

interface Arguments {
  readonly command: string | undefined;
  readonly email: string | undefined;
  readonly name: string | undefined;
  readonly isAdministrator: boolean;
}

function readArguments(args: readonly string[]): Arguments {
  try {
    const { values, positionals } = parseArgs({
      args: [...args],
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

/**
 * Does what the command line says.
 * @param readPassword asked only where a password is needed
 * @returns what to tell the person
 * @throws UsageError, AppError
 */
export async function runUserCommand(args: readonly string[], readPassword: () => Promise<string>): Promise<string> {
  const { command, email, name, isAdministrator } = readArguments(args);
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
  if (password === "") throw new UsageError("Give the password on standard input.");
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
