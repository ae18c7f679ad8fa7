import { setTimeout as delay } from "node:timers/promises";
import { eq } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { changes } from "@/db/schema/board";
import { frames } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { boardCommandSchema, type BoardCommand } from "@/lib/board/command-schema";
import { runCommand } from "@/lib/board/command-writes";
import type { Board } from "@/lib/board/model";
import { AppError } from "@/lib/errors/app-error";
import { frameIdSchema, newId, projectIdSchema } from "@/lib/ids";
import { makeEventfulBoard } from "./make-board";
import { makeRandom } from "./random";

export interface Giving {
  readonly projectId: string;
  readonly clients: readonly { readonly userId: string; readonly seed: number }[];
  readonly commandsEach: number;
}

/** The places that commands name: a row and two columns more than the made board has. */
const PLACES = { rows: 4, columns: 8 };
const NEW_STACKS = 12;

/**
 * Gives commands as so many clients at once, each waiting for its answer before the next. Every seventh is sent twice,
 * as a client does whose connection broke. Refusals are part of it: the clients know nothing of each other.
 * @returns ids and revisions of what was acknowledged
 */
export async function giveCommands({ projectId, clients, commandsEach }: Giving): Promise<Record<string, number>> {
  const acknowledged: Record<string, number> = {};
  const start = { ...makeEventfulBoard(), projectId };
  await Promise.all(
    clients.map(async ({ userId, seed }) => {
      const access = {
        projectId: projectIdSchema.parse(projectId),
        userId,
        role: "editor",
      } as unknown as ProjectAccess;
      const random = makeRandom(seed);
      for (let at = 0; at < commandsEach; at += 1) {
        const command = anyCommand(random, start, Object.keys(acknowledged).at(-1));
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

/**
 * A command on the frames, stacks and questions of a board as it was at first: most are possible, some not.
 * @param newest - id of a command that may be undone
 */
export function anyCommand(random: () => number, start: Board, newest: string | undefined): BoardCommand {
  const pick = <Item>(items: readonly Item[]): Item => items[Math.floor(random() * items.length)] as Item;
  const upTo = (most: number) => 1 + Math.floor(random() * most);
  const made = Array.from({ length: NEW_STACKS }, (_, at) => `made-${at}-${start.projectId}`);
  const frameId = pick(start.frames).id;
  const frameIds = [frameId];
  const stackId = pick(random() < 0.7 ? made : start.stacks.map(({ id }) => id));
  const place = { row: upTo(PLACES.rows), column: upTo(PLACES.columns) };
  const axis = pick(["row", "column"]);
  const question = pick(start.questions);
  const body = pick<() => object>([
    () => ({ type: "move-frames", frameIds, to: { kind: "stack", stackId } }),
    () => ({ type: "move-frames", frameIds, to: { kind: "new-stack", stackId: pick(made), place } }),
    () => ({ type: "move-frames", frameIds, to: { kind: "loose" } }),
    () => ({ type: "place-stack", stackId, place, occupied: pick(["swap", "push", "take", "refuse"]) }),
    () => ({ type: "set-aside", frameIds }),
    () => ({ type: "bring-back", frameIds }),
    () => ({ type: "merge-stacks", intoStackId: stackId, stackIds: [pick(made)] }),
    () => ({ type: "choose-take", stackId }),
    () => ({ type: pick(["add-line", "remove-line"]), axis, at: upTo(PLACES.rows) }),
    () => ({ type: "settle", target: { kind: "question", questionId: question.id, answer: 0 } }),
    () => ({ type: "settle", target: { kind: "stack", stackId, isSettled: random() < 0.5 } }),
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
  const frameIds = makeEventfulBoard().frames.map((frame) => frame.id);
  let written = 0;
  while (!signal.aborted) {
    const frameId = frameIdSchema.parse(frameIds[written % frameIds.length] ?? "");
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
