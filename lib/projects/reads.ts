import "server-only";
import { asc, desc, eq, inArray, sql } from "drizzle-orm";
import { database } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { questions } from "@/db/schema/board";
import { files, frames, stacks } from "@/db/schema/frames";
import { members, projects } from "@/db/schema/projects";
import type { ProjectAccess, SignedInUser } from "@/lib/auth/gate";
import type { Role } from "@/lib/auth/roles";
import { progressColumns, toProgress } from "@/lib/frames/reads";
import type { Progress } from "@/lib/frames/schema";
import type { ProjectId, UserId } from "@/lib/ids";

export interface Member {
  readonly userId: UserId;
  readonly name: string;
  readonly role: Role;
}

export interface ProjectSummary {
  readonly id: ProjectId;
  readonly name: string;
  /** The asking person's. */
  readonly role: Role;
  readonly frames: number;
  /** Places of the grid that hold a stack. */
  readonly tiles: number;
  readonly openQuestions: number;
  readonly progress: Progress;
  readonly members: readonly Member[];
  /** Originals, bytes: what deleting the project frees at least. */
  readonly bytes: number;
  readonly isArchived: boolean;
  readonly isDemo: boolean;
  readonly createdAtMs: number;
}

export interface Project extends ProjectSummary {
  readonly revision: number;
  /** The grid as it is; 0: nothing sorted yet. */
  readonly rows: number;
  readonly columns: number;
  readonly overlapWanted: number;
  readonly framesPerTile: { readonly least: number; readonly most: number };
  readonly longestPauseSeconds: number | null;
  readonly expectedRows: number | null;
  readonly expectedColumns: number | null;
}

// Qualified by hand: inside a subquery of a select from one table drizzle leaves table names out.
const ofProject = sql.raw(`where project_id = "projects"."id"`);
const summaryColumns = {
  id: projects.id,
  name: projects.name,
  isDemo: projects.isDemo,
  archivedAtMs: projects.archivedAtMs,
  createdAtMs: projects.createdAtMs,
  frames: sql<number>`(select count(*) from ${frames} ${ofProject})`,
  tiles: sql<number>`(select count(distinct "row" || ' ' || "column") from ${stacks} ${ofProject} and "row" is not null)`,
  openQuestions: sql<number>`(select count(*) from ${questions} ${ofProject} and settled_at_ms is null)`,
  progress: progressColumns,
  bytes: sql<number>`(select coalesce(sum(bytes), 0) from ${files} ${ofProject})`,
};

/** The person's projects, the newest first, those in the archive last. */
export async function listProjects(user: SignedInUser): Promise<ProjectSummary[]> {
  const rows = await database()
    .select({ ...summaryColumns, role: members.role })
    .from(members)
    .innerJoin(projects, eq(projects.id, members.projectId))
    .where(eq(members.userId, user.id))
    .orderBy(sql`${projects.archivedAtMs} is not null`, desc(projects.createdAtMs), asc(projects.id));
  const people = await listMembersOf(rows.map((row) => row.id));
  return rows.map(({ archivedAtMs, progress, ...row }) => ({
    ...row,
    progress: toProgress(progress),
    isArchived: archivedAtMs !== null,
    members: people.get(row.id) ?? [],
  }));
}

/** @throws Error where the project went between the gate and here */
export async function getProject(access: ProjectAccess): Promise<Project> {
  const [row] = await database()
    .select({
      ...summaryColumns,
      revision: projects.revision,
      rows: projects.rows,
      columns: projects.columns,
      overlapWanted: projects.overlapWanted,
      framesLeast: projects.framesLeast,
      framesMost: projects.framesMost,
      longestPauseSeconds: projects.longestPauseSeconds,
      expectedRows: projects.expectedRows,
      expectedColumns: projects.expectedColumns,
    })
    .from(projects)
    .where(eq(projects.id, access.projectId));
  if (!row) throw new Error("the project went while it was read");
  const { archivedAtMs, framesLeast, framesMost, progress, ...rest } = row;
  const people = await listMembersOf([access.projectId]);
  return {
    ...rest,
    progress: toProgress(progress),
    role: access.role,
    isArchived: archivedAtMs !== null,
    framesPerTile: { least: framesLeast, most: framesMost },
    members: people.get(access.projectId) ?? [],
  };
}

async function listMembersOf(projectIds: readonly ProjectId[]): Promise<Map<ProjectId, Member[]>> {
  const rows = await database()
    .select({ projectId: members.projectId, userId: users.id, name: users.name, role: members.role })
    .from(members)
    .innerJoin(users, eq(users.id, members.userId))
    .where(inArray(members.projectId, [...projectIds]))
    .orderBy(asc(members.joinedAtMs), asc(users.id));
  const byProject = new Map<ProjectId, Member[]>();
  for (const { projectId, ...member } of rows) byProject.set(projectId, [...(byProject.get(projectId) ?? []), member]);
  return byProject;
}
