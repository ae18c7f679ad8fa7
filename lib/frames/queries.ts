import { queryOptions } from "@tanstack/react-query";
import { intakeListSchema, progressSchema } from "@/lib/frames/schema";
import { fetchJson } from "@/lib/http/fetch-json";

export const frameKeys = {
  all: (projectId: string) => ["projects", projectId, "frames"] as const,
  progress: (projectId: string) => ["projects", projectId, "frames", "progress"] as const,
  intake: (projectId: string) => ["projects", projectId, "frames", "intake"] as const,
};

/** How many files are in, analysed, failed; whether the board covers them. */
export function progressQuery(projectId: string) {
  return queryOptions({
    queryKey: frameKeys.progress(projectId),
    queryFn: ({ signal }) => fetchJson(`/api/projects/${projectId}/progress`, progressSchema, { signal }),
  });
}

/** What came in, what was refused and why, what is still under way. */
export function intakeQuery(projectId: string) {
  return queryOptions({
    queryKey: frameKeys.intake(projectId),
    queryFn: ({ signal }) => fetchJson(`/api/projects/${projectId}/files`, intakeListSchema, { signal }),
  });
}
