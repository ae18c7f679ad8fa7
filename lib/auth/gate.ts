import "server-only";
import { and, eq, gt, isNull } from "drizzle-orm";
import { database } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import { members, projects } from "@/db/schema/projects";
import { allows, type Right, type Role } from "@/lib/auth/roles";
import { findSession } from "@/lib/auth/session";
import { AppError } from "@/lib/errors/app-error";
import type { ProjectId, SessionId, UserId } from "@/lib/ids";

declare const gate: unique symbol;

/** Proof that somebody may see or change a project. Only this file makes one; every project read and write takes one. */
export interface ProjectAccess {
  readonly [gate]: true;
  readonly projectId: ProjectId;
  /** Null: the worker, on behalf of a job. */
  readonly userId: UserId | null;
  readonly role: Role;
}

/** Who is signed in. */
export interface SignedInUser {
  readonly id: UserId;
  readonly sessionId: SessionId;
  readonly email: string;
  readonly name: string;
  readonly isAdministrator: boolean;
}

/** @throws AppError unauthenticated where no living session of an enabled account is presented */
export async function requireUser(): Promise<SignedInUser> {
  const user = await findSession();
  if (!user) throw new AppError("unauthenticated", "Sign in first.");
  return user;
}

/**
 * The one authorisation gate of projects. The role comes from the database, never from the cookie.
 * A project in the archive can only be looked at, unless `evenArchived` (taking it out, deleting it).
 * @throws AppError unauthenticated; not_found where the person is no member (the administrator too); forbidden; conflict
 */
export async function requireProject(
  projectId: ProjectId,
  right: Right,
  { evenArchived = false }: { readonly evenArchived?: boolean } = {},
): Promise<ProjectAccess> {
  const user = await requireUser();
  const [member] = await database()
    .select({ role: members.role, archivedAtMs: projects.archivedAtMs })
    .from(members)
    .innerJoin(projects, eq(projects.id, members.projectId))
    .where(and(eq(members.projectId, projectId), eq(members.userId, user.id)));
  if (!member) throw new AppError("not_found", "There is no such project, or you are not in it.");
  if (!allows(member.role, right)) throw new AppError("forbidden", REFUSALS[right]);
  if (member.archivedAtMs !== null && right !== "view" && !evenArchived) {
    throw new AppError("conflict", "This project is in the archive. It must be taken out of the archive first.");
  }
  return mint(projectId, user.id, member.role);
}

/** Whether a session that was let in to look would be let in now: for answers that stay open long after the gate. */
export async function mayStillView(user: SignedInUser, projectId: ProjectId, nowMs: number): Promise<boolean> {
  const [row] = await database()
    .select({ role: members.role })
    .from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .innerJoin(members, and(eq(members.userId, users.id), eq(members.projectId, projectId)))
    .where(and(eq(sessions.id, user.sessionId), gt(sessions.expiresAtMs, nowMs), isNull(users.disabledAtMs)));
  return row !== undefined && allows(row.role, "view");
}

/** The gate for the worker: a job has been asked for by somebody who had the right. */
export function accessForJob(job: { readonly projectId: ProjectId }): ProjectAccess {
  return mint(job.projectId, null, "editor");
}

const REFUSALS: Record<Right, string> = {
  view: "You may not see this project.",
  edit: "As a viewer you may look and comment, not change. Ask the project's lead to make you an editor.",
  manage: "Only a lead of the project may do this.",
};

function mint(projectId: ProjectId, userId: UserId | null, role: Role): ProjectAccess {
  return { projectId, userId, role } as ProjectAccess;
}
