import "server-only";
import { and, eq, inArray, isNull, ne, or } from "drizzle-orm";
import { database } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { uploads } from "@/db/schema/frames";
import { members, projects } from "@/db/schema/projects";
import type { ProjectId, UploadId, UserId } from "@/lib/ids";

export interface DemoProject {
  readonly id: ProjectId;
  readonly name: string;
}

export async function listDemoProjects(): Promise<DemoProject[]> {
  return database()
    .select({ id: projects.id, name: projects.name })
    .from(projects)
    .where(eq(projects.isDemo, true))
    .orderBy(projects.createdAtMs);
}

export interface DemoUpload {
  readonly id: UploadId;
  readonly name: string;
  readonly folder: string | null;
  readonly isFinished: boolean;
}

/** What a making that was cut short has brought in so far. */
export async function listDemoUploads(projectId: ProjectId): Promise<DemoUpload[]> {
  const rows = await database()
    .select({ id: uploads.id, name: uploads.name, folder: uploads.folder, finishedAtMs: uploads.finishedAtMs })
    .from(uploads)
    .where(and(eq(uploads.projectId, projectId), isNull(uploads.cancelledAtMs)));
  return rows.map(({ finishedAtMs, ...row }) => ({ ...row, isFinished: finishedAtMs !== null }));
}

export async function listDemoUserIds(): Promise<UserId[]> {
  const rows = await database().select({ id: users.id }).from(users).where(eq(users.isDemo, true));
  return rows.map(({ id }) => id);
}

/** Names of the projects, other than the demo, that the demo's people are in or have brought files into. */
export async function listOtherProjectsOf(userIds: readonly UserId[]): Promise<string[]> {
  const rows = await database()
    .selectDistinct({ name: projects.name })
    .from(projects)
    .leftJoin(members, eq(members.projectId, projects.id))
    .leftJoin(uploads, eq(uploads.projectId, projects.id))
    .where(
      and(ne(projects.isDemo, true), or(inArray(members.userId, [...userIds]), inArray(uploads.userId, [...userIds]))),
    );
  return rows.map(({ name }) => name);
}
