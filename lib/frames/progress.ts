import "server-only";
import { and, count, eq, isNull, sql } from "drizzle-orm";
import { database } from "@/db/client";
import { files, uploads } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { Progress } from "@/lib/frames/schema";

/** How far a project's files are, as interfaces.md defines `/progress`. */
export async function getProgress(access: ProjectAccess): Promise<Progress> {
  const ofState = (state: string) => sql<number>`coalesce(sum(${files.state} in (${sql.raw(state)})), 0)`;
  const [[file], [upload], [project]] = await Promise.all([
    database()
      .select({
        received: count(),
        analysed: ofState("'analysed', 'duplicate'"),
        failed: ofState("'failed'"),
      })
      .from(files)
      .where(eq(files.projectId, access.projectId)),
    database()
      .select({ unfinished: count() })
      .from(uploads)
      .where(and(eq(uploads.projectId, access.projectId), isNull(uploads.finishedAtMs), isNull(uploads.cancelledAtMs))),
    database()
      .select({ contentVersion: projects.contentVersion, sortedVersion: projects.sortedVersion })
      .from(projects)
      .where(eq(projects.id, access.projectId)),
  ]);
  const { received = 0, analysed = 0, failed = 0 } = file ?? {};
  const isCovered = project !== undefined && project.contentVersion === project.sortedVersion;
  return {
    received,
    analysed,
    failed,
    total: received + (upload?.unfinished ?? 0),
    sorted: received > 0 && analysed + failed === received && isCovered,
  };
}
