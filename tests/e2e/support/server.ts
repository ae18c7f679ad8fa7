import { execFile } from "node:child_process";
import { promisify } from "node:util";
import type { Role } from "@/lib/auth/roles";
import type { Person } from "./people";

const run = promisify(execFile);

/** What the tests do behind the product's back, each in a process of its own beside web and worker. */
async function runServerScript(...args: string[]): Promise<void> {
  const options = ["--import", "tsx", "--conditions=react-server", "tests/e2e/support/server-script.ts"];
  await run(process.execPath, [...options, ...args], {
    env: { ...process.env, STORAGE_DIR: process.env.E2E_STORAGE_DIR, NODE_ENV: "production" },
  });
}

export function addAccount({ email, name, password }: Person): Promise<void> {
  return runServerScript("add-account", email, name, password);
}

export function addMember(projectId: string, person: Person, role: Role): Promise<void> {
  return runServerScript("add-member", projectId, person.email, role);
}

/** As when the person signs out everywhere, or an administrator disables them. */
export function endSessionsOf(person: Person): Promise<void> {
  return runServerScript("end-sessions", person.email);
}
