import { closeDatabase, writeTransaction } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";
import { members } from "@/db/schema/projects";
import type { Board } from "@/lib/board/model";
import type { ProjectId } from "@/lib/ids";
import { createAccount } from "@/lib/people/writes";
import { newProjectSchema } from "@/lib/projects/schema";
import { createProject } from "@/lib/projects/writes";
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
    const board = prefixed(plain, at);
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

/** Ids are the same in every made board, but unique over all projects; as long as real ones, for the board's size. */
function prefixed(board: Board, at: number): Board {
  const longId = (id: string) => `${at}-${id}-`.padEnd(36, "0");
  return {
    ...board,
    stacks: board.stacks.map((stack) => ({
      ...stack,
      id: longId(stack.id),
      referenceId: stack.referenceId === null ? null : longId(stack.referenceId),
    })),
    frames: board.frames.map((frame) => ({
      ...frame,
      id: longId(frame.id),
      stackId: frame.stackId === null ? null : longId(frame.stackId),
      files: frame.files.map((file) => ({ ...file, id: longId(file.id) })),
    })),
    seams: board.seams.map((seam) => ({
      ...seam,
      stackId: longId(seam.stackId),
      neighbourId: longId(seam.neighbourId),
    })),
  };
}
