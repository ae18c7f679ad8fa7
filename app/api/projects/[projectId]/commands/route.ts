import { requireProject } from "@/lib/auth/gate";
import { GIVEN_BY_HEADER } from "@/lib/board/command-answers";
import { boardCommandSchema } from "@/lib/board/command-schema";
import { runCommand } from "@/lib/board/command-writes";
import { AppError } from "@/lib/errors/app-error";
import { projectParamsSchema } from "@/lib/frames/schema";
import { answerJson } from "@/lib/http/answer";
import { readJson } from "@/lib/http/read-json";
import { route } from "@/lib/http/route";

export const POST = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "edit");
  const givenBy = request.headers.get(GIVEN_BY_HEADER);
  if (givenBy !== null && givenBy !== access.userId) {
    throw new AppError("unauthenticated", "Somebody else has signed in meanwhile. Sign in as yourself to go on.");
  }
  const command = await readJson(request, boardCommandSchema);
  return answerJson(await runCommand(access, command, Date.now()));
});
