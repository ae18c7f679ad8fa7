import { z } from "zod";
import { requireProject } from "@/lib/auth/gate";
import { answerJson } from "@/lib/http/answer";
import { readJson } from "@/lib/http/read-json";
import { route } from "@/lib/http/route";
import { projectIdSchema } from "@/lib/ids";
import { getProject } from "@/lib/projects/reads";
import { projectChangeSchema, projectRemovalSchema } from "@/lib/projects/schema";
import { changeProject, deleteProject } from "@/lib/projects/writes";

const paramsSchema = z.object({ projectId: projectIdSchema });

export const GET = route(paramsSchema, async (_request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  return answerJson(await getProject(access));
});

export const PATCH = route(paramsSchema, async (request, { projectId }) => {
  await requireProject(projectId, "manage", { evenArchived: true });
  const change = await readJson(request, projectChangeSchema);
  // In the archive nothing changes but that it is in the archive.
  const access = await requireProject(projectId, "manage", { evenArchived: change.isArchived !== undefined });
  await changeProject(access, change);
  return answerJson(await getProject(access));
});

export const DELETE = route(paramsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "manage", { evenArchived: true });
  const { confirmation } = await readJson(request, projectRemovalSchema);
  return answerJson(await deleteProject(access, confirmation));
});
