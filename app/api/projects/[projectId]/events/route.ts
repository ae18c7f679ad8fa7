import { mayStillView, requireProject, requireUser } from "@/lib/auth/gate";
import { lastEventIdOf } from "@/lib/events/last-event-id";
import { streamEvents } from "@/lib/events/stream";
import { projectParamsSchema } from "@/lib/frames/schema";
import { route } from "@/lib/http/route";

export const GET = route(projectParamsSchema, async (request, { projectId }) => {
  const user = await requireUser();
  const access = await requireProject(projectId, "view");
  const stream = streamEvents(access, {
    afterId: lastEventIdOf(request.headers),
    signal: request.signal,
    mayListen: () => mayStillView(user, projectId, Date.now()),
  });
  // no-transform: Next would hold the stream back to compress it.
  const headers = { "content-type": "text/event-stream", "cache-control": "no-cache, no-transform" };
  return new Response(stream, { headers });
});
