import { addMember, makePerson, makeProject, type Person } from "../support/people";
import * as fc from "fast-check";
import { asc, eq } from "drizzle-orm";
import { expect, test } from "vitest";
import { database } from "@/db/client";
import { changes } from "@/db/schema/board";
import type { ProjectAccess } from "@/lib/auth/gate";
import { applyChanges } from "@/lib/board/changes";
import { runCommand } from "@/lib/board/command-writes";
import type { Board } from "@/lib/board/model";
import { forgetBoard } from "@/lib/board/planning-reads";
import { getBoard } from "@/lib/board/reads";
import { AppError } from "@/lib/errors/app-error";
import { newId } from "@/lib/ids";
import { expectWhole } from "../support/expect-whole";
import { useDatabase } from "../support/database";
import { anyCommand } from "../support/give-commands";
import { makeEventfulBoard } from "../support/make-board";
import { prefixed } from "../support/prefixed-board";
import { makeRandom } from "../support/random";
import { storeBoard } from "../support/stored-board";

useDatabase();

/** Who gives the next command, and whether the process has lost the board that it kept (as after a restart). */
const anyTurn = fc.record({ who: fc.nat(2), isForgotten: fc.boolean(), isTwice: fc.boolean() });
const anyRun = fc.record({
  seed: fc.nat(1_000_000),
  turns: fc.array(anyTurn, { minLength: 5, maxLength: 25 }),
  back: fc.double({ min: 0, max: 1, noNaN: true }),
});

let runs = 0;

test("any interleaving of several people's commands on the database keeps board and record whole", async () => {
  const people = [await makePerson("Lena"), await makePerson("Jonas"), await makePerson("Mira")];
  await fc.assert(
    fc.asyncProperty(anyRun, async ({ seed, turns, back }) => {
      runs += 1;
      const { projectId, accesses, start } = await makeYard(people, `r${runs}`);
      const random = makeRandom(seed);
      const given: string[] = [];
      for (const { who, isForgotten, isTwice } of turns) {
        const access = accesses[who];
        if (!access) throw new Error("nobody");
        if (isForgotten) forgetBoard(projectId);
        const command = anyCommand(random, start, given[Math.floor(random() * given.length)]);
        const answer = await unlessRefused(runCommand(access, command, 0));
        if (!answer) continue;
        given.push(answer.id);
        expect(answer.revision).toBe(given.length);
        if (isTwice) expect(await runCommand(access, command, 1)).toEqual(answer);
      }
      const rows = await listRows(projectId);
      expect(rows.map(({ id, revision }) => [id, revision])).toEqual(given.map((id, at) => [id, at + 1]));
      const boards = [start];
      for (const { steps } of rows) boards.push(applyChanges(boards.at(-1) ?? start, steps));
      const end = await getBoard({ ...accesses[0], projectId } as ProjectAccess);
      expectWhole(end, start);
      expect(decided(end)).toEqual(decided(boards.at(-1) ?? start));

      if (given.length === 0) return;
      const toRevision = Math.floor(back * given.length);
      const lead = accesses[0];
      if (!lead) throw new Error("nobody");
      await runCommand(lead, { id: newId(), revision: 0, type: "undo-back-to", toRevision }, 2);
      expect(decided(await getBoard(lead))).toEqual(decided(boards[toRevision] ?? start));
    }),
    { numRuns: 20 },
  );
}, 180_000);

async function makeYard(people: readonly Person[], prefix: string) {
  const [lead, ...editors] = people;
  if (!lead) throw new Error("nobody");
  const projectId = await makeProject(lead);
  for (const editor of editors) await addMember(projectId, editor, "editor");
  await storeBoard(projectId, lead, prefixed(makeEventfulBoard(), prefix));
  const accesses = people.map(({ id }) => ({ projectId, userId: id, role: "lead" }) as unknown as ProjectAccess);
  const start = applyChanges(await getBoard({ projectId } as ProjectAccess), []);
  return { projectId, accesses, start };
}

function listRows(projectId: ProjectAccess["projectId"]) {
  return database()
    .select({ id: changes.id, revision: changes.revision, steps: changes.steps })
    .from(changes)
    .where(eq(changes.projectId, projectId))
    .orderBy(asc(changes.revision));
}

async function unlessRefused<Answer>(answer: Promise<Answer>): Promise<Answer | null> {
  return answer.catch((error: unknown) => {
    if (error instanceof AppError) return null;
    throw error;
  });
}

function decided(board: Board) {
  const { frames, stacks, questions, grid } = applyChanges(board, []);
  return { frames, stacks, questions, grid };
}
