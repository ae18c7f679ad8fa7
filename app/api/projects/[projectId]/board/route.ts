import { requireProject } from "@/lib/auth/gate";
import { getBoard } from "@/lib/board/reads";
import { boardQuerySchema } from "@/lib/board/schema";
import { getBoardSince } from "@/lib/board/since-reads";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson, answerJsonUnlessSame } from "@/lib/http/answer";
import { readQuery } from "@/lib/http/read-query";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  const { since } = readQuery(request, boardQuerySchema);
  if (since === undefined) return answerJsonUnlessSame(request, await getBoard(access));
  return answerJson(await getBoardSince(access, since));
});
