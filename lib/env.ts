import { availableParallelism } from "node:os";
import path from "node:path";
import { z } from "zod";

/** The only reader of process.env. Every variable is described in the README. */
const environmentSchema = z.object({
  NODE_ENV: z.enum(["development", "production", "test"]).default("development"),
  PORT: z.coerce.number().int().min(0).max(65535).default(3000),
  HOST: z.string().min(1).default("127.0.0.1"),
  APP_URL: z.url().optional(),
  STORAGE_DIR: z.string().min(1).default("storage"),
  DATABASE_URL: z.string().min(1).optional(),
  AUTH_SECRET: z.string().min(16).optional(),
  SMTP_URL: z.url().optional(),
  WORKER_CONCURRENCY: z.coerce.number().int().min(1).max(64).optional(),
  STORAGE_RESERVE_MB: z.coerce.number().int().min(0).default(1024),
  SHARED_DIR: z.string().min(1).default("../shared"),
});

export interface Environment {
  readonly mode: "development" | "production" | "test";
  readonly port: number;
  readonly host: string;
  /** No trailing slash. */
  readonly appUrl: string;
  /** Absolute. */
  readonly storageDir: string;
  readonly databaseUrl: string;
  /** Null: made once and kept in the storage directory. */
  readonly authSecret: string | null;
  readonly smtpUrl: string | null;
  readonly workerConcurrency: number;
  readonly storageReserveBytes: number;
  readonly sharedDir: string;
}

/**
 * Parses the environment; empty variables count as absent.
 * @throws Error naming each variable that is wrong
 */
export function parseEnvironment(source: Record<string, string | undefined>): Environment {
  const present = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== undefined && value !== ""));
  const parsed = environmentSchema.safeParse(present);
  if (!parsed.success) {
    throw new Error(`The environment is not usable:\n${z.prettifyError(parsed.error)}`);
  }
  const values = parsed.data;
  const storageDir = path.resolve(values.STORAGE_DIR);
  return {
    mode: values.NODE_ENV,
    port: values.PORT,
    host: values.HOST,
    appUrl: (values.APP_URL ?? defaultAppUrl(values.HOST, values.PORT)).replace(/\/+$/, ""),
    storageDir,
    databaseUrl: values.DATABASE_URL ?? `file:${path.join(storageDir, "stackyard.db")}`,
    authSecret: values.AUTH_SECRET ?? null,
    smtpUrl: values.SMTP_URL ?? null,
    workerConcurrency: values.WORKER_CONCURRENCY ?? availableParallelism(),
    storageReserveBytes: values.STORAGE_RESERVE_MB * 1024 * 1024,
    sharedDir: path.resolve(values.SHARED_DIR),
  };
}

/** An address that a browser on this machine can open: "every interface" is none, and IPv6 needs brackets. */
function defaultAppUrl(host: string, port: number): string {
  if (host === "0.0.0.0" || host === "::") return `http://localhost:${port}`;
  return `http://${host.includes(":") ? `[${host}]` : host}:${port}`;
}

let cached: Environment | undefined;

/** The environment of this process, read once. */
export function environment(): Environment {
  cached ??= parseEnvironment(process.env);
  return cached;
}

/** Where the command was given: npm runs scripts in the project's folder and says in INIT_CWD where it was called. */
export function callerFolder(): string {
  return path.resolve(/* turbopackIgnore: true */ process.env.INIT_CWD ?? process.cwd());
}

/** The environment for a process of ours: this one's, with what differs. */
export function childEnvironment(different: Record<string, string>): NodeJS.ProcessEnv {
  return { ...process.env, ...different };
}

/** next-auth reads its own address from the environment only; it is always APP_URL. */
export function followAppUrl(): void {
  process.env.NEXTAUTH_URL = environment().appUrl;
}
