import "server-only";
import { findWorkerSeenAtMs, LEASE_MS } from "@/lib/jobs/queue";
import { probeStorage } from "@/lib/storage/disk";

const PARTS = ["web", "database", "storage", "worker"] as const;
type Part = (typeof PARTS)[number];

export interface Health extends Readonly<Record<Part, "ok" | "failing">> {
  readonly status: "ok" | "failing";
  /** Which parts do not answer. */
  readonly failing: readonly Part[];
}

/** Asks each part of the product whether it works. The web answers by answering. */
export async function getHealth(nowMs: number): Promise<Health> {
  // One read tells of both: where the database does not answer, nothing is known of the worker either.
  const [seenAtMs, hasStorage] = await Promise.all([
    findWorkerSeenAtMs().catch(() => undefined),
    probeStorage().then(
      () => true,
      () => false,
    ),
  ]);
  const isAlive = typeof seenAtMs === "number" && nowMs - seenAtMs < LEASE_MS;
  const state = (isOk: boolean) => (isOk ? "ok" : "failing");
  const parts = {
    web: "ok",
    database: state(seenAtMs !== undefined),
    storage: state(hasStorage),
    worker: state(isAlive),
  } as const;
  const failing = PARTS.filter((part) => parts[part] === "failing");
  return { status: state(failing.length === 0), failing, ...parts };
}
