import { requireProject } from "@/lib/auth/gate";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson } from "@/lib/http/answer";
import { route } from "@/lib/http/route";
import { getIntakeList } from "@/lib/intake/intake-list";

export const GET = route(projectParamsSchema, async (_request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  return answerJson(await getIntakeList(access));
});
