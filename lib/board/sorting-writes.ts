import "server-only";
import { eq, sql } from "drizzle-orm";
import { type Transaction, writeTransaction } from "@/db/client";
import { changes } from "@/db/schema/board";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { publish } from "@/lib/events/publish";
import { newId } from "@/lib/ids";
import { requestJob } from "@/lib/jobs/queue";
import { sortJobRequest } from "@/lib/jobs/requests";

/**
 * Asks for a sorting that lets go of its own earlier results and keeps what people decided. Asked for again before it
 * is done, it is done once.
 */
export async function requestSortingAnew(access: ProjectAccess, nowMs: number): Promise<void> {
  const sentence = "had the frames sorted again; what people decided stays";
  await writeTransaction(async (tx) => {
    const [project] = await tx
      .select({ isAnewWanted: projects.isAnewWanted })
      .from(projects)
      .where(eq(projects.id, access.projectId));
    if (project && !project.isAnewWanted) await wantSortingAnew(tx, access, sentence, nowMs);
  });
}

/** The same, in the transaction of what made it necessary: one that runs already is begun again. */
export async function wantSortingAnew(
  tx: Transaction,
  { projectId, userId }: ProjectAccess,
  sentence: string,
  nowMs: number,
): Promise<void> {
  const [project] = await tx
    .update(projects)
    .set({
      isAnewWanted: true,
      revision: sql`${projects.revision} + 1`,
      contentVersion: sql`${projects.contentVersion} + 1`,
    })
    .where(eq(projects.id, projectId))
    .returning({ revision: projects.revision });
  if (!project) return;
  const { revision } = project;
  const record = { id: newId(), projectId, revision, userId, type: "sort-anew", payload: {}, sentence, atMs: nowMs };
  await tx.insert(changes).values(record);
  await publish(tx, projectId, { type: "board.changed", revision }, nowMs);
  await requestJob(tx, sortJobRequest(projectId, 0), nowMs);
}
