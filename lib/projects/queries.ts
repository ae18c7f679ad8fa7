import { queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { projectStatusSchema } from "@/lib/projects/schema";

export const projectKeys = {
  all: (projectId: string) => ["projects", projectId, "project"] as const,
  status: (projectId: string) => ["projects", projectId, "project", "status"] as const,
};

/** What the board that is open shows of it; nobody fetches it. */
export const shownStatusKey = (projectId: string) => ["projects", projectId, "shown status"] as const;

/** How far a project is: for the job ticket. */
export function projectStatusQuery(projectId: string) {
  return queryOptions({
    queryKey: projectKeys.status(projectId),
    queryFn: ({ signal }) => fetchJson(`/api/projects/${projectId}`, projectStatusSchema, { signal }),
  });
}
