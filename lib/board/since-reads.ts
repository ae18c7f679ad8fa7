import "server-only";
import { and, asc, eq, gt, sql } from "drizzle-orm";
import type { z } from "zod";
import { database } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { changes } from "@/db/schema/board";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { boardSinceSchema } from "@/lib/board/command-answers";
import { getBoard, getRevision } from "@/lib/board/reads";

/** More steps than this weigh as much as the board, and take longer to apply than to draw anew. Our own. */
const STEPS_MOST = 500;

/** Who did what is told of the newest few steps: a page says no more at once. */
const TOLD_MOST = 3;

type BoardSince = z.infer<typeof boardSinceSchema>;

/** What has happened since a revision that the page has: nothing, the steps in between, or the board as a whole. */
export async function getBoardSince(access: ProjectAccess, since: number): Promise<BoardSince> {
  const revision = await getRevision(access);
  if (since === revision) return { unchanged: true, revision };
  return (await listSteps(access, since)) ?? { ...(await getBoard(access)), full: true };
}

/** Null where steps do not tell it all: a sorting lies between, or more than fits, or a revision that never was. */
async function listSteps({ projectId }: ProjectAccess, since: number): Promise<BoardSince | null> {
  const later = and(eq(changes.projectId, projectId), gt(changes.revision, since));
  const [size] = await database()
    .select({
      rows: sql<number>`count(*)`,
      newest: sql<number | null>`max(${changes.revision})`,
      steps: sql<number>`coalesce(sum(json_array_length(${changes.steps})), 0)`,
      sortings: sql<number>`coalesce(sum(${changes.type} = 'sort'), 0)`,
    })
    .from(changes)
    .where(later);
  if (!size || size.newest === null || size.sortings > 0 || size.steps > STEPS_MOST) return null;
  const rows = await database()
    .select({
      revision: changes.revision,
      steps: changes.steps,
      personId: users.id,
      name: users.name,
      sentence: changes.sentence,
    })
    .from(changes)
    .leftJoin(users, eq(users.id, changes.userId))
    .where(later)
    .orderBy(asc(changes.revision));
  // Every revision has its row; where one is missing (since is too old, or from another database) steps tell nothing.
  const newest = rows.at(-1)?.revision ?? since;
  if (rows.length !== newest - since || rows.length < size.rows) return null;
  const told = rows.slice(-TOLD_MOST).flatMap(({ personId, name, sentence, revision }) => {
    return personId === null || name === null ? [] : [{ revision, person: { id: personId, name }, sentence }];
  });
  return { since, revision: newest, changes: rows.flatMap(({ steps }) => steps), told };
}
