import { spawn, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import { expect } from "@playwright/test";
import { claimPort } from "@/scripts/launch/port";

const SERVER_TYPESCRIPT = ["--import", "tsx", "--conditions=react-server"];
type Part = "web" | "worker";

/** Web and worker on a storage folder, started as `npm run launch` starts them, but by hand: each may be killed at any moment. */
export class TwoProcesses {
  private readonly children = new Map<Part, ChildProcess>();
  output = "";

  private constructor(
    readonly address: string,
    private readonly env: NodeJS.ProcessEnv,
  ) {}

  static async make(storageDir: string): Promise<TwoProcesses> {
    const port = String(await claimPort(0, "127.0.0.1"));
    const address = `http://127.0.0.1:${port}`;
    const env = { ...process.env, NODE_ENV: "production" as const, PORT: port, HOST: "127.0.0.1", APP_URL: address };
    return new TwoProcesses(address, { ...env, STORAGE_DIR: storageDir });
  }

  private spawn(args: readonly string[]): ChildProcess {
    const child = spawn(process.execPath, args, { env: this.env, stdio: ["pipe", "pipe", "pipe"] });
    for (const stream of [child.stdout, child.stderr]) stream?.on("data", (text) => (this.output += String(text)));
    return child;
  }

  /** As `npm run user -- add` does; prepares the database too. */
  async addAccount({ email, name, password }: { email: string; name: string; password: string }): Promise<void> {
    const child = this.spawn([...SERVER_TYPESCRIPT, "scripts/user.ts", "add", email, "--name", name]);
    child.stdin?.end(`${password}\n`);
    const [code] = await once(child, "exit");
    expect(code, this.output).toBe(0);
  }

  start(part: Part): void {
    const { PORT = "" } = this.env;
    const next = ["node_modules/next/dist/bin/next", "start", "-H", "127.0.0.1", "-p", PORT];
    this.children.set(part, this.spawn(part === "web" ? next : [...SERVER_TYPESCRIPT, "worker.ts"]));
  }

  async untilHealthy(): Promise<void> {
    const status = async () => (await fetch(`${this.address}/api/health`).catch(() => null))?.status;
    await expect.poll(status, { timeout: 60_000, intervals: [100], message: "web and worker answer" }).toBe(200);
  }

  /** Ends it in the middle of whatever it does, and waits until it is gone. */
  async kill(part: Part): Promise<void> {
    const child = this.children.get(part);
    if (!child) throw new Error(`the ${part} was not started`);
    this.children.delete(part);
    const ended = once(child, "exit");
    child.kill("SIGKILL");
    await ended;
  }

  async end(): Promise<void> {
    for (const part of [...this.children.keys()]) await this.kill(part);
  }
}
