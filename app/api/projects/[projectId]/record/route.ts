import { requireProject } from "@/lib/auth/gate";
import { listRecord } from "@/lib/board/record-reads";
import { recordQuerySchema } from "@/lib/board/record-schema";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson } from "@/lib/http/answer";
import { readQuery } from "@/lib/http/read-query";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  return answerJson(await listRecord(access, readQuery(request, recordQuerySchema)));
});
