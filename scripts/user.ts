/** `npm run --silent user -- add|password|disable|list`: accounts from the command line, also while the product runs. */
import { closeDatabase } from "@/db/client";
import { withoutParameters } from "@/lib/errors/logs";
import { runUserCommand, UsageError } from "./user/run";

const USAGE = `Usage, with the password on standard input where one is needed:
  npm run --silent user -- add EMAIL --name NAME [--admin]
  npm run --silent user -- password EMAIL
  npm run --silent user -- disable EMAIL
  npm run --silent user -- list`;

/** All of standard input but one line end at its end, which `echo` and the Enter key add. */
async function readPassword(): Promise<string> {
  if (process.stdin.isTTY) process.stderr.write("Password (it is shown while you type; then Enter and Ctrl-D): ");
  const chunks: Buffer[] = [];
  for await (const chunk of process.stdin) chunks.push(Buffer.from(chunk));
  return Buffer.concat(chunks)
    .toString("utf8")
    .replace(/\r?\n$/, "");
}

// It may be the first to come, and make the database.
process.umask(0o077);
try {
  console.log(await runUserCommand(process.argv.slice(2), readPassword));
} catch (thrown) {
  const error = withoutParameters(thrown);
  // One clear line: a stack trace helps nobody at a prompt.
  console.error(error instanceof Error ? error.message : String(error));
  if (error instanceof UsageError) console.error(USAGE);
  process.exitCode = error instanceof UsageError ? 2 : 1;
} finally {
  await closeDatabase();
}
