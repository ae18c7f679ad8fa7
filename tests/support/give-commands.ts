import { setTimeout as delay } from "node:timers/promises";
import { eq } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { changes } from "@/db/schema/board";
import { frames } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { boardCommandSchema, type BoardCommand } from "@/lib/board/command-schema";
import { runCommand } from "@/lib/board/command-writes";
import { AppError } from "@/lib/errors/app-error";
import { frameIdSchema, newId, projectIdSchema } from "@/lib/ids";
import { makeRandom } from "./random";

export interface Giving {
  readonly projectId: string;
  readonly clients: readonly { readonly userId: string; readonly seed: number }[];
  readonly commandsEach: number;
}

/** Of `makeEventfulBoard`. */
const FRAMES = 106;
const PLACES = { rows: 4, columns: 8 };
const STACK_IDS = Array.from({ length: 12 }, (_, at) => `made-${at}`);

/**
 * Gives commands as so many clients at once, each waiting for its answer before the next. Every seventh is sent twice,
 * as a client does whose connection broke. Refusals are part of it: the clients know nothing of each other.
 * @returns ids and revisions of what was acknowledged
 */
export async function giveCommands({ projectId, clients, commandsEach }: Giving): Promise<Record<string, number>> {
  const acknowledged: Record<string, number> = {};
  await Promise.all(
    clients.map(async ({ userId, seed }) => {
      const access = {
        projectId: projectIdSchema.parse(projectId),
        userId,
        role: "editor",
      } as unknown as ProjectAccess;
      const random = makeRandom(seed);
      for (let at = 0; at < commandsEach; at += 1) {
        const command = anyCommand(random, Object.keys(acknowledged).at(-1));
        for (let sent = 0; sent < (at % 7 === 0 ? 2 : 1); sent += 1) {
          const answer = await runCommand(access, command, Date.now()).catch((error: unknown) => {
            if (error instanceof AppError) return null;
            throw error;
          });
          if (!answer) continue;
          const before = acknowledged[answer.id];
          if (before !== undefined && before !== answer.revision) throw new Error("answered otherwise the second time");
          acknowledged[answer.id] = answer.revision;
        }
        // SQLite's waiting is not fair: without a pause one process might keep the other out.
        await delay(1);
      }
    }),
  );
  return acknowledged;
}

function anyCommand(random: () => number, newest: string | undefined): BoardCommand {
  const pick = <Item>(items: readonly Item[]): Item => items[Math.floor(random() * items.length)] as Item;
  const frameIds = [`frame-${Math.floor(random() * FRAMES)}`];
  const stackId = pick([...STACK_IDS, "stack-1-1", "stack-1-2", "stack-2-3", "stack-3-6"]);
  const place = { row: 1 + Math.floor(random() * PLACES.rows), column: 1 + Math.floor(random() * PLACES.columns) };
  const body = pick<() => object>([
    () => ({ type: "move-frames", frameIds, to: { kind: "stack", stackId } }),
    () => ({ type: "move-frames", frameIds, to: { kind: "new-stack", stackId: pick(STACK_IDS), place } }),
    () => ({ type: "move-frames", frameIds, to: { kind: "loose" } }),
    () => ({ type: "place-stack", stackId, place, occupied: pick(["swap", "push", "take", "refuse"]) }),
    () => ({ type: "set-aside", frameIds }),
    () => ({ type: "bring-back", frameIds }),
    () => ({ type: "merge-stacks", intoStackId: stackId, stackIds: [pick(STACK_IDS)] }),
    () => ({ type: "undo", commandId: newest ?? newId() }),
  ])();
  return boardCommandSchema.parse({ id: newId(), revision: 0, ...body });
}

/**
 * Writes as the worker does while people work: what it measured of a frame, as a revision of its own with its step.
 * @returns how many revisions
 */
export async function writeLikeWorker(id: string, signal: AbortSignal): Promise<number> {
  const projectId = projectIdSchema.parse(id);
  let written = 0;
  while (!signal.aborted) {
    const frameId = frameIdSchema.parse(`frame-${written % FRAMES}`);
    await writeTransaction(async (tx) => {
      const [project] = await tx
        .select({ revision: projects.revision })
        .from(projects)
        .where(eq(projects.id, projectId));
      const [frame] = await tx
        .select({ relativeSharpness: frames.relativeSharpness })
        .from(frames)
        .where(eq(frames.id, frameId));
      const revision = (project?.revision ?? 0) + 1;
      const relativeSharpness = (written % 100) / 100;
      await tx.update(projects).set({ revision }).where(eq(projects.id, projectId));
      await tx.update(frames).set({ relativeSharpness }).where(eq(frames.id, frameId));
      await tx.insert(changes).values({
        id: newId(),
        projectId,
        revision,
        type: "measure",
        payload: {},
        steps: [
          {
            on: "frame",
            id: frameId,
            before: { relativeSharpness: frame?.relativeSharpness ?? null },
            after: { relativeSharpness },
          },
        ],
        sentence: "measured a stack anew",
        atMs: Date.now(),
      });
    });
    written += 1;
    await delay(25);
  }
  return written;
}
