import "server-only";
import { and, eq, inArray } from "drizzle-orm";
import type { Transaction } from "@/db/client";
import { members } from "@/db/schema/projects";
import { allows } from "@/lib/auth/roles";
import type { Board, BoardStack } from "@/lib/board/model";
import { type ProjectId, userIdSchema } from "@/lib/ids";

/** Stacks that would be given to somebody who is not in the project, or may not edit. */
export async function listUnfitShares(
  tx: Transaction,
  projectId: ProjectId,
  before: Board,
  after: Board,
): Promise<BoardStack[]> {
  const was = new Map(before.stacks.map((stack) => [stack.id, stack.shareUserId]));
  const given = after.stacks.filter(({ id, shareUserId }) => shareUserId !== null && was.get(id) !== shareUserId);
  const ids = [...new Set(given.map(({ shareUserId }) => userIdSchema.parse(shareUserId)))];
  if (ids.length === 0) return [];
  const rows = await tx
    .select({ userId: members.userId, role: members.role })
    .from(members)
    .where(and(eq(members.projectId, projectId), inArray(members.userId, ids)));
  const mayEdit = new Set<string>(rows.filter(({ role }) => allows(role, "edit")).map(({ userId }) => userId));
  return given.filter(({ shareUserId }) => shareUserId !== null && !mayEdit.has(shareUserId));
}
