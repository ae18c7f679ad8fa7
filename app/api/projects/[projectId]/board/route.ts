import { requireProject } from "@/lib/auth/gate";
import { withPresentNames } from "@/lib/board/present-names";
import { getBoard } from "@/lib/board/reads";
import { boardQuerySchema } from "@/lib/board/schema";
import { getBoardSince } from "@/lib/board/since-reads";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson, answerJsonUnlessSame } from "@/lib/http/answer";
import { readQuery } from "@/lib/http/read-query";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  const { since, texts } = readQuery(request, boardQuerySchema);
  if (since === undefined) {
    const board = await getBoard(access);
    return answerJsonUnlessSame(request, texts === "tokens" ? board : withPresentNames(board));
  }
  return answerJson(await getBoardSince(access, since));
});
