import { addMember, makePerson, makeProject } from "../support/people";
import { spawn } from "node:child_process";
import { once } from "node:events";
import path from "node:path";
import { asc } from "drizzle-orm";
import { expect, test } from "vitest";
import { database } from "@/db/client";
import { changes } from "@/db/schema/board";
import { accessForJob } from "@/lib/auth/gate";
import { applyChanges } from "@/lib/board/changes";
import type { Board } from "@/lib/board/model";
import { getBoard } from "@/lib/board/reads";
import { expectWhole } from "../support/expect-whole";
import { useDatabase } from "../support/database";
import { giveCommands, type Giving } from "../support/give-commands";
import { makeEventfulBoard } from "../support/make-board";
import { storeBoard } from "../support/stored-board";

const storageDir = useDatabase();
const ROOT = path.resolve(import.meta.dirname, "../..");
const COMMANDS_EACH = 500;

interface Given {
  readonly acknowledged: Record<string, number>;
  readonly measured: number;
}

/** Two clients and a worker in a process of their own. */
async function startSecond(giving: Giving): Promise<Promise<Given>> {
  const script = path.join(ROOT, "tests/support/second-commander.ts");
  const child = spawn(
    process.execPath,
    ["--import", "tsx", "--conditions=react-server", script, JSON.stringify(giving)],
    { cwd: ROOT, env: { ...process.env, STORAGE_DIR: storageDir }, stdio: ["ignore", "pipe", "inherit"] },
  );
  let output = "";
  child.stdout.setEncoding("utf8").on("data", (text: string) => (output += text));
  await once(child.stdout, "data"); // it begins now
  return (async () => {
    if (child.exitCode === null) await once(child, "exit");
    return JSON.parse(output.trim().split("\n").at(-1) ?? "") as Given;
  })();
}

test("2 000 commands of four clients in two processes, while a worker writes: none is lost, none doubled", async () => {
  const people = [];
  for (const name of ["Lena", "Jonas", "Mira", "Tom"]) people.push(await makePerson(name));
  const [lena, ...editors] = people;
  if (!lena) throw new Error("nobody");
  const projectId = await makeProject(lena);
  for (const editor of editors) await addMember(projectId, editor, "editor");
  await storeBoard(projectId, lena, makeEventfulBoard());
  const access = accessForJob({ projectId });
  const start = await getBoard(access);
  const clients = people.map(({ id }, at) => ({ userId: id, seed: 100 + at }));

  const second = await startSecond({ projectId, clients: clients.slice(2), commandsEach: COMMANDS_EACH });
  const here = await giveCommands({ projectId, clients: clients.slice(0, 2), commandsEach: COMMANDS_EACH });
  const { acknowledged: there, measured } = await second;

  const rows = await database()
    .select({ id: changes.id, revision: changes.revision, userId: changes.userId, steps: changes.steps })
    .from(changes)
    .orderBy(asc(changes.revision));
  const end = await getBoard(access);
  // Revisions without a hole, the last of them the board's.
  expect(rows.map(({ revision }) => revision)).toEqual(rows.map((_, at) => at + 1));
  expect(end.revision).toBe(rows.length);
  // Every acknowledged command is in the record once, at the revision that was answered; and nothing else is.
  const recorded = Object.fromEntries(rows.flatMap(({ id, userId, revision }) => (userId ? [[id, revision]] : [])));
  expect(recorded).toEqual({ ...here, ...there });
  expect(rows.length - Object.keys(recorded).length).toBe(measured);
  // Enough of them that it means something: most are possible, and the worker came in between.
  expect(Object.keys(here).length).toBeGreaterThan(COMMANDS_EACH);
  expect(Object.keys(there).length).toBeGreaterThan(COMMANDS_EACH);
  expect(measured).toBeGreaterThan(20);
  // And in the board: the record played from the beginning gives it.
  const replayed = rows.reduce<Board>((board, { steps }) => applyChanges(board, steps), start);
  const { frames, stacks, grid, questions } = applyChanges(end, []);
  expect({ frames: replayed.frames, stacks: replayed.stacks, grid: replayed.grid }).toEqual({ frames, stacks, grid });
  expect(replayed.questions).toEqual(questions);
  expectWhole(end, start);
}, 240_000);
