import { queryOptions } from "@tanstack/react-query";
import { presenceSchema } from "@/lib/board/command-answers";
import { fetchJson } from "@/lib/http/fetch-json";

export const presenceKeys = {
  all: (projectId: string) => ["projects", projectId, "presence"] as const,
};

/** Who has the board open now, oneself included. */
export function presenceQuery(projectId: string) {
  return queryOptions({
    queryKey: presenceKeys.all(projectId),
    queryFn: ({ signal }) => fetchJson(presenceUrl(projectId), presenceSchema, { signal }),
  });
}

/** Says that one is here, on a tile or on none; answers who is here. @throws FetchProblem */
export function sendPresence(projectId: string, tile: string | null) {
  return fetchJson(presenceUrl(projectId), presenceSchema, {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify({ tile }),
  });
}

/** Says that the board is being closed: also from a page that is going, so nothing waits for the answer. */
export function sendLeaving(projectId: string): void {
  fetch(presenceUrl(projectId), {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify({ tile: null, isLeaving: true }),
    keepalive: true,
    // Where it does not arrive, silence says the same a little later.
  }).catch(() => undefined);
}

function presenceUrl(projectId: string): string {
  return `/api/projects/${projectId}/presence`;
}
