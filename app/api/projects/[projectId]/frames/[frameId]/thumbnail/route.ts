import { requireProject } from "@/lib/auth/gate";
import { readThumbnail } from "@/lib/frames/pictures";
import { getFramePicture } from "@/lib/frames/reads";
import { frameParamsSchema } from "@/lib/frames/schema";
import { answerPicture } from "@/lib/http/answer";
import { route } from "@/lib/http/route";

export const GET = route(frameParamsSchema, async (request, { projectId, frameId }) => {
  const access = await requireProject(projectId, "view");
  const picture = await getFramePicture(access, frameId);
  return answerPicture(request, `thumbnail-${picture.sha256}`, () => readThumbnail(picture));
});
