// The demo's command, run by `npm run launch`: "make ADDRESS" or "remove".
import { closeDatabase } from "@/db/client";
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from "@/lib/demo/accounts";
import { makeDemo } from "@/lib/demo/make";
import { removeDemo } from "@/lib/demo/remove";
import { listDemoAccounts } from "@/lib/people/reads";
import { withoutParameters } from "@/lib/errors/logs";
import { readDemoState } from "@/lib/storage/demo-state";
import { makeDemoShoot } from "./demo/make-demo-shoot";

async function make(address: string): Promise<void> {
  const state = await readDemoState();
  if (state === null) await makeDemo({ address, makeShoot: makeDemoShoot, say, onAccounts: printAccounts });
  else if ((await listDemoAccounts()).length > 0) printAccounts();
}

function say(sentence: string): void {
  console.log(sentence);
}

function printAccounts(): void {
  for (const { email, role, task } of DEMO_ACCOUNTS) say(`${role.padEnd(6)} ${email}  ${task}`);
  say(`The password of all three is ${DEMO_PASSWORD}`);
}

async function remove(): Promise<void> {
  const { projects, accounts, freedBytes } = await removeDemo();
  if (projects + accounts === 0) console.log("There is no demo; none will be made.");
  else console.log(`The demo is gone: ${accounts} accounts, ${(freedBytes / 1e6).toFixed(0)} MB of files.`);
}

const [command, address] = process.argv.slice(2);
try {
  if (command === "make" && address) await make(address);
  else if (command === "remove") await remove();
  else throw new Error("Use: make ADDRESS, or remove");
} catch (thrown) {
  const error = withoutParameters(thrown);
  console.error(error instanceof Error ? error.message : String(error));
  process.exitCode = 1;
} finally {
  await closeDatabase();
}
