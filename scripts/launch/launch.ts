import { access, constants, mkdir } from "node:fs/promises";
import { parseEnvironment, type Environment } from "@/lib/env";
import { ensureBuild } from "../setup/build.mjs";
import { run } from "../setup/project.mjs";
import { HELP, parseLaunchOptions } from "./options";
import { claimPort, localAddress } from "./port";
import { startOnce, supervise, type Supervised } from "./supervise";

/** Node.js arguments for the project's own TypeScript on the server side. */
const SERVER_TYPESCRIPT = ["--import", "tsx", "--conditions=react-server"];
const HEALTH_EVERY_MS = 150;
const READY_WITHIN_MS = 90_000;
const PARENT_CHECK_MS = 1_000;

/**
 * Runs the product until it is asked to stop.
 * @returns the exit code: 0 after Ctrl-C or SIGTERM
 * @throws Error in plain words where it cannot start
 */
export async function launch(args: readonly string[]): Promise<number> {
  const option = parseLaunchOptions(args);
  if (option === "help") {
    console.log(HELP);
    return 0;
  }
  const settings = parseEnvironment(process.env);
  await prepareStorage(settings);
  if (option === "remove-demo") {
    await migrate();
    return run(process.execPath, [...SERVER_TYPESCRIPT, "scripts/demo-intake.ts", "remove"]);
  }
  const port = await claimPort(settings.port, settings.host);
  await ensureBuild();
  // Web and worker inherit it: originals, previews and the database are for this account of the machine alone.
  process.umask(0o077);
  await migrate();
  return runUntilStopped(settings, port, option === "launch");
}

async function prepareStorage({ storageDir }: Environment): Promise<void> {
  try {
    await mkdir(storageDir, { recursive: true, mode: 0o700 });
    await access(storageDir, constants.R_OK | constants.W_OK);
  } catch (cause) {
    throw new Error(`Cannot write to the storage folder ${storageDir} (STORAGE_DIR).`, { cause });
  }
}

async function migrate(): Promise<void> {
  const code = await run(process.execPath, [...SERVER_TYPESCRIPT, "db/migrate.ts"]);
  if (code !== 0) throw new Error("The database could not be brought up to date (its message is above).");
}

async function runUntilStopped(settings: Environment, port: number, withDemo: boolean): Promise<number> {
  const local = localAddress(settings.host, port);
  const appUrl = process.env.APP_URL ? settings.appUrl : local;
  const env: NodeJS.ProcessEnv = {
    ...process.env,
    NODE_ENV: "production",
    NEXT_TELEMETRY_DISABLED: "1",
    PORT: String(port),
    HOST: settings.host,
    APP_URL: appUrl,
    STORAGE_DIR: settings.storageDir,
  };
  const running: Supervised[] = [];
  const code = await new Promise<number>((resolve) => {
    const onGivenUp = (reason: string) => {
      console.error(`${reason} Stopping. What it said last is above.`);
      resolve(1);
    };
    const nextArgs = ["node_modules/next/dist/bin/next", "start", "-H", settings.host, "-p", String(port)];
    running.push(supervise({ name: "web", args: nextArgs, env, onGivenUp }));
    running.push(supervise({ name: "worker", args: [...SERVER_TYPESCRIPT, "worker.ts"], env, onGivenUp }));
    process.once("SIGINT", () => resolve(0));
    process.once("SIGTERM", () => resolve(0));
    process.once("SIGHUP", () => resolve(0));
    whenParentIsGone(() => resolve(0));
    void announce({ local, appUrl, withDemo, env, running }).catch((error: unknown) => onGivenUp(String(error)));
  });
  console.log("Stopping.");
  await Promise.all(running.map((process) => process.stop()));
  return code;
}

/** npm passes SIGTERM on, but nothing where it is killed itself; what it started must not stay on the port. */
function whenParentIsGone(stop: () => void): void {
  if (process.env.npm_lifecycle_event !== "launch") return;
  const parent = process.ppid;
  const timer = setInterval(() => {
    if (process.ppid !== parent) stop();
  }, PARENT_CHECK_MS);
  timer.unref();
}

interface Running {
  readonly local: string;
  readonly appUrl: string;
  readonly withDemo: boolean;
  readonly env: NodeJS.ProcessEnv;
  /** Everything that has to be stopped in the end. */
  readonly running: Supervised[];
}

/** Says when the product answers, and then makes the demo where it is wanted. */
async function announce({ local, appUrl, withDemo, env, running }: Running): Promise<void> {
  await waitForHealth(local);
  console.log(`Ready: ${appUrl}`);
  if (!withDemo) return;
  const args = [...SERVER_TYPESCRIPT, "scripts/demo-intake.ts", "make", local];
  running.push(startOnce({ name: "demo", args, env }));
}

/** @throws Error naming what does not answer */
async function waitForHealth(local: string): Promise<void> {
  const untilMs = Date.now() + READY_WITHIN_MS;
  let last = "no answer yet";
  while (Date.now() < untilMs) {
    try {
      const response = await fetch(`${local}/api/health`);
      if (response.ok) return;
      last = await response.text();
    } catch (error) {
      last = String(error instanceof Error && error.cause ? error.cause : error);
    }
    await new Promise((resolve) => setTimeout(resolve, HEALTH_EVERY_MS));
  }
  throw new Error(`${local}/api/health did not answer 200 within ${READY_WITHIN_MS / 1000} s: ${last}`);
}
