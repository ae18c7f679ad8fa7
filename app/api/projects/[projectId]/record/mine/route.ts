import { requireProject } from "@/lib/auth/gate";
import { getUndoState } from "@/lib/board/record-reads";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson } from "@/lib/http/answer";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (_request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  return answerJson(await getUndoState(access));
});
