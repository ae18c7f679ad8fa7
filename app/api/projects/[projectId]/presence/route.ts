import { requireProject, requireUser } from "@/lib/auth/gate";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson } from "@/lib/http/answer";
import { readJson } from "@/lib/http/read-json";
import { route } from "@/lib/http/route";
import { listPresent } from "@/lib/presence/reads";
import { presencePostSchema } from "@/lib/presence/schema";
import { leaveBoard, notePresence } from "@/lib/presence/writes";

export const GET = route(projectParamsSchema, async (_, { projectId }) => {
  const access = await requireProject(projectId, "view");
  return answerJson({ people: await listPresent(access, Date.now()) });
});

export const POST = route(projectParamsSchema, async (request, { projectId }) => {
  const user = await requireUser();
  const access = await requireProject(projectId, "view");
  const { tile, isLeaving } = await readJson(request, presencePostSchema);
  const nowMs = Date.now();
  if (isLeaving) await leaveBoard(access, user, nowMs);
  else await notePresence(access, user, tile, nowMs);
  return answerJson({ people: await listPresent(access, nowMs) });
});
