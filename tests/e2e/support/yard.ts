import { spawn, type ChildProcess } from "node:child_process";
import { mkdtemp, readdir, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { expect } from "@playwright/test";
import { claimPort } from "@/scripts/launch/port";

export interface Launched {
  readonly child: ChildProcess;
  readonly address: string;
  /** Everything said so far. */
  output(): string;
  /** Its exit code, once it ended. */
  readonly ended: Promise<number | null>;
}

/** A storage folder of a test's own, and whatever was launched on it. */
export class Yard {
  private readonly launched: Launched[] = [];

  private constructor(readonly storageDir: string) {}

  static async make(): Promise<Yard> {
    return new Yard(await mkdtemp(path.join(tmpdir(), "stackyard-launch-")));
  }

  /** As a person types it, npm included. */
  launch(options: readonly string[], env: Readonly<Record<string, string>> = {}): Launched {
    const port = env.PORT ?? "0";
    const child = spawn("npm", ["run", "launch", "--", ...options], {
      env: { ...process.env, PORT: port, HOST: "127.0.0.1", STORAGE_DIR: this.storageDir, ...env },
      stdio: ["ignore", "pipe", "pipe"],
    });
    let text = "";
    child.stdout.on("data", (chunk) => (text += chunk));
    child.stderr.on("data", (chunk) => (text += chunk));
    const ended = new Promise<number | null>((resolve) => child.once("exit", resolve));
    const result = { child, address: `http://127.0.0.1:${port}`, output: () => text, ended };
    this.launched.push(result);
    return result;
  }

  /** @returns once it answers */
  async launchUntilReady(...options: string[]): Promise<Launched> {
    const launched = this.launch(options, { PORT: String(await claimPort(0, "127.0.0.1")) });
    const lines = () => launched.output().split("\n");
    await expect.poll(lines, { timeout: 90_000, intervals: [100] }).toContain(`Ready: ${launched.address}`);
    return launched;
  }

  /** Ids of the processes that were given this storage folder: launch, web, worker and its children. */
  async listProcesses(): Promise<number[]> {
    const ids = (await readdir("/proc")).filter((name) => /^\d+$/.test(name));
    const found = await Promise.all(
      ids.map(async (id) => {
        const environment = await readFile(`/proc/${id}/environ`, "utf8").catch(() => "");
        return environment.split("\0").includes(`STORAGE_DIR=${this.storageDir}`) ? [Number(id)] : [];
      }),
    );
    return found.flat();
  }

  /** @param part of its command line */
  async findProcess(part: string): Promise<number | undefined> {
    for (const id of await this.listProcesses()) {
      const commandLine = await readFile(`/proc/${id}/cmdline`, "utf8").catch(() => "");
      if (commandLine.split("\0").join(" ").includes(part)) return id;
    }
    return undefined;
  }

  async killProcess(part: string): Promise<number> {
    const id = await this.findProcess(part);
    if (id === undefined) throw new Error(`no process runs ${part}`);
    process.kill(id, "SIGKILL");
    return id;
  }

  /** Ends what still runs, and removes the folder. */
  async clear(): Promise<void> {
    for (const id of await this.listProcesses()) process.kill(id, "SIGKILL");
    await Promise.all(this.launched.map(({ ended }) => ended));
    await rm(this.storageDir, { recursive: true, force: true });
  }
}
