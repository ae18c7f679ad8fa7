import { requireProject } from "@/lib/auth/gate";
import { projectParamsSchema } from "@/lib/frames/schema";
import { getManifest } from "@/lib/handover/reads";
import { manifestQuerySchema } from "@/lib/handover/schema";
import { attachment } from "@/lib/http/attachment";
import { readQuery } from "@/lib/http/read-query";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (request, { projectId }) => {
  const access = await requireProject(projectId, "view");
  const { share, download } = readQuery(request, manifestQuerySchema);
  const manifest = await getManifest(access, share, Date.now());
  const headers = new Headers({ "cache-control": "no-store", "content-type": "application/json" });
  if (download !== undefined) headers.set("content-disposition", attachment(manifest.project.name, ".manifest.json"));
  // Indented: people open it too.
  return new Response(`${JSON.stringify(manifest, null, 2)}\n`, { headers });
});
