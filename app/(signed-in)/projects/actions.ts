"use server";

import { revalidatePath } from "next/cache";
import { redirect } from "next/navigation";
import { readProjectForm } from "@/app/(signed-in)/projects/project-form";
import { requireProject, requireUser, type ProjectAccess } from "@/lib/auth/gate";
import { AppError } from "@/lib/errors/app-error";
import { parseForm, runForm, textOf } from "@/lib/http/form-action";
import type { FormState } from "@/lib/http/form-state";
import { projectIdSchema } from "@/lib/ids";
import { newProjectSchema, projectRemovalSchema } from "@/lib/projects/schema";
import { archiveProject, createProject, deleteProject, renameProject, updateSettings } from "@/lib/projects/writes";

export async function createProjectForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const user = await requireUser();
    const id = await createProject(user, readProjectForm(form));
    redirect(`/projects/${id}/intake`);
  });
}

export async function renameProjectForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const access = await manage(form, { evenArchived: false });
    const { name } = parseForm(newProjectSchema.pick({ name: true }), { name: textOf(form, "name") });
    await renameProject(access, name);
    revalidatePath("/projects");
    return "The project has its new name.";
  });
}

export async function saveSettingsForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const access = await manage(form, { evenArchived: false });
    const { name, ...settings } = readProjectForm(form);
    await renameProject(access, name);
    await updateSettings(access, settings);
    revalidatePath(`/projects/${access.projectId}`, "layout");
    return "The settings are saved.";
  });
}

export async function archiveProjectForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const access = await manage(form, { evenArchived: true });
    const isArchived = textOf(form, "isArchived") === "true";
    await archiveProject(access, isArchived);
    revalidatePath("/projects", "layout");
    return isArchived ? "The project is in the archive." : "The project is out of the archive.";
  });
}

export async function deleteProjectForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const access = await manage(form, { evenArchived: true });
    const { confirmation } = parseForm(projectRemovalSchema, { confirmation: textOf(form, "confirmation") });
    const { freedBytes } = await deleteProject(access, confirmation);
    revalidatePath("/projects");
    redirect(`/projects?freed=${freedBytes}`);
  });
}

async function manage(form: FormData, options: { readonly evenArchived: boolean }): Promise<ProjectAccess> {
  const projectId = projectIdSchema.safeParse(textOf(form, "projectId"));
  if (!projectId.success) throw new AppError("not_found", "There is no such project, or you are not in it.");
  return requireProject(projectId.data, "manage", options);
}
