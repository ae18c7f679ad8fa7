import { requireProject } from "@/lib/auth/gate";
import { requestSortingAnew } from "@/lib/board/sorting-writes";
import { projectParamsSchema } from "@/lib/frames/schema";
import { route } from "@/lib/http/route";

/** Sorts anew what nobody has touched. Answers at once; the board changes when the worker is done. */
export const POST = route(projectParamsSchema, async (_, { projectId }) => {
  const access = await requireProject(projectId, "edit");
  await requestSortingAnew(access, Date.now());
  return new Response(null, { status: 202, headers: { "cache-control": "no-store" } });
});
