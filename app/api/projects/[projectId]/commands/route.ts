import { requireProject } from "@/lib/auth/gate";
import { boardCommandSchema } from "@/lib/board/command-schema";
import { runCommand } from "@/lib/board/command-writes";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson } from "@/lib/http/answer";
import { readJson } from "@/lib/http/read-json";
import { route } from "@/lib/http/route";

export const POST = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "edit");
  const command = await readJson(request, boardCommandSchema);
  return answerJson(await runCommand(access, command, Date.now()));
});
