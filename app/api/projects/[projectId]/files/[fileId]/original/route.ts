import { requireProject } from "@/lib/auth/gate";
import { openOriginal } from "@/lib/frames/originals";
import { getOriginalFile } from "@/lib/frames/reads";
import { fileParamsSchema } from "@/lib/frames/schema";
import { answerFile } from "@/lib/http/answer-file";
import { route } from "@/lib/http/route";

const answer = route(fileParamsSchema, async (request, { projectId, fileId }) => {
  const access = await requireProject(projectId, "edit");
  return answerFile(request, await openOriginal(await getOriginalFile(access, fileId)));
});

export { answer as GET, answer as HEAD };
