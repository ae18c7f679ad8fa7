import "server-only";
import { eq } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { members, projects } from "@/db/schema/projects";
import type { ProjectAccess, SignedInUser } from "@/lib/auth/gate";
import { AppError } from "@/lib/errors/app-error";
import { newId, projectIdSchema, type ProjectId } from "@/lib/ids";
import type { NewProject, ProjectChange, ProjectSettings } from "@/lib/projects/schema";

/** Makes a project; whoever makes it is its lead. */
export async function createProject(
  user: Pick<SignedInUser, "id">,
  { name, overlapWanted, framesPerTile }: NewProject,
  marks: { readonly isDemo?: boolean } = {},
): Promise<ProjectId> {
  const id = projectIdSchema.parse(newId());
  const nowMs = Date.now();
  await writeTransaction(async (tx) => {
    await tx.insert(projects).values({
      id,
      name,
      overlapWanted,
      framesLeast: framesPerTile.least,
      framesMost: framesPerTile.most,
      isDemo: marks.isDemo ?? false,
      createdAtMs: nowMs,
    });
    await tx.insert(members).values({ projectId: id, userId: user.id, role: "lead", joinedAtMs: nowMs });
  });
  return id;
}

/** Name, archive and settings at once, as PATCH sends them. */
export async function changeProject(access: ProjectAccess, change: ProjectChange): Promise<void> {
  const { framesPerTile, isArchived, ...columns } = change;
  await writeTransaction((tx) =>
    tx
      .update(projects)
      .set({
        ...columns,
        ...(framesPerTile && { framesLeast: framesPerTile.least, framesMost: framesPerTile.most }),
        ...(isArchived !== undefined && { archivedAtMs: isArchived ? Date.now() : null }),
      })
      .where(eq(projects.id, access.projectId)),
  );
}

export function renameProject(access: ProjectAccess, name: string): Promise<void> {
  return changeProject(access, { name });
}

export function archiveProject(access: ProjectAccess, isArchived: boolean): Promise<void> {
  return changeProject(access, { isArchived });
}

export function updateSettings(access: ProjectAccess, settings: ProjectSettings): Promise<void> {
  return changeProject(access, settings);
}

/**
 * Deletes a project with its originals and previews.
 * @param confirmation the project's name, typed by the person
 * @returns bytes freed on disk
 * @throws AppError invalid where the confirmation is not the name
 */
export async function deleteProject(access: ProjectAccess, confirmation: string): Promise<{ freedBytes: number }> {
  return writeTransaction(async (tx) => {
    const [project] = await tx.select({ name: projects.name }).from(projects).where(eq(projects.id, access.projectId));
    if (!project) return { freedBytes: 0 };
    if (confirmation.normalize("NFC").trim() !== project.name) {
      const message = "Type the project's name exactly as it is written.";
      throw new AppError("invalid", message, { fields: [{ field: "confirmation", message }] });
    }
    await tx.delete(projects).where(eq(projects.id, access.projectId));
    return { freedBytes: 0 };
  });
}
