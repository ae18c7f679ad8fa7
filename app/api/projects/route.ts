import { z } from "zod";
import { requireProject, requireUser } from "@/lib/auth/gate";
import { answerJson } from "@/lib/http/answer";
import { readJson } from "@/lib/http/read-json";
import { route } from "@/lib/http/route";
import { getProject, listProjects } from "@/lib/projects/reads";
import { newProjectSchema } from "@/lib/projects/schema";
import { createProject } from "@/lib/projects/writes";

const paramsSchema = z.unknown();

export const GET = route(paramsSchema, async () => {
  const user = await requireUser();
  return answerJson({ projects: await listProjects(user) });
});

export const POST = route(paramsSchema, async (request) => {
  const user = await requireUser();
  const id = await createProject(user, await readJson(request, newProjectSchema));
  const project = await getProject(await requireProject(id, "view"));
  return Response.json(project, { status: 201, headers: { location: `/api/projects/${id}` } });
});
