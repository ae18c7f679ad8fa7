import { requireProject } from "@/lib/auth/gate";
import { cutCrop } from "@/lib/frames/pictures";
import { getFramePicture } from "@/lib/frames/reads";
import { cropQuerySchema, frameParamsSchema } from "@/lib/frames/schema";
import { answerPicture } from "@/lib/http/answer";
import { readQuery } from "@/lib/http/read-query";
import { route } from "@/lib/http/route";

export const GET = route(frameParamsSchema, async (request, { projectId, frameId }) => {
  const access = await requireProject(projectId, "view");
  const crop = readQuery(request, cropQuerySchema);
  const picture = await getFramePicture(access, frameId);
  const name = `crop-${picture.sha256}-${crop.x}-${crop.y}-${crop.w}-${crop.h}`;
  return answerPicture(request, name, () => cutCrop(picture, crop, request.signal));
});
