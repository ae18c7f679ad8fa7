import { requireProject } from "@/lib/auth/gate";
import { getBoard, getRevision } from "@/lib/board/reads";
import { boardQuerySchema } from "@/lib/board/schema";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson, answerJsonUnlessSame } from "@/lib/http/answer";
import { readQuery } from "@/lib/http/read-query";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  const { since } = readQuery(request, boardQuerySchema);
  if (since === undefined) return answerJsonUnlessSame(request, await getBoard(access));
  const revision = await getRevision(access);
  if (since === revision) return answerJson({ unchanged: true, revision });
  return answerJson({ ...(await getBoard(access)), full: true });
});
