import { closeDatabase, writeTransaction } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";
import { members } from "@/db/schema/projects";
import type { Board } from "@/lib/board/model";
import type { ProjectId } from "@/lib/ids";
import { createAccount } from "@/lib/people/writes";
import { newProjectSchema } from "@/lib/projects/schema";
import { createProject } from "@/lib/projects/writes";
import { prefixed } from "@/tests/support/prefixed-board";
import { storeBoard } from "@/tests/support/stored-board";

/** Fresh storage with one project a board, and so many people who may edit all of them. */
export async function makeProjects(boards: readonly Board[], people: number, password: string) {
  await migrateDatabase();
  const editors = [];
  for (let at = 0; at < people; at += 1) {
    const account = { email: `editor-${at}@example.org`, name: `Editor ${at}`, password };
    editors.push({ ...account, id: await createAccount(account) });
  }
  const [lead, ...others] = editors;
  if (!lead) throw new Error("somebody must make the projects");
  const projects: { id: ProjectId; board: Board }[] = [];
  for (const [at, plain] of boards.entries()) {
    const board = prefixed(plain, String(at));
    const id = await createProject(lead, newProjectSchema.parse({ name: `${board.frames.length} frames` }));
    await writeTransaction(async (tx) => {
      for (const { id: userId } of others) {
        await tx.insert(members).values({ projectId: id, userId, role: "editor", joinedAtMs: 0 });
      }
    });
    await storeBoard(id, lead, board);
    projects.push({ id, board });
  }
  return { emails: editors.map(({ email }) => email), projects };
}

export const close = closeDatabase;
