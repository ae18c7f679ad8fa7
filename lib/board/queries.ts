import { queryOptions } from "@tanstack/react-query";
import { boardSchema } from "@/lib/board/schema";
import { fetchJson } from "@/lib/http/fetch-json";

export const boardKeys = {
  all: (projectId: string) => ["projects", projectId, "board"] as const,
  board: (projectId: string) => ["projects", projectId, "board", "whole"] as const,
};

/** The whole board. The browser revalidates by ETag: an unchanged board costs a 304. */
export function boardQuery(projectId: string) {
  return queryOptions({
    queryKey: boardKeys.board(projectId),
    queryFn: ({ signal }) => fetchJson(`/api/projects/${projectId}/board`, boardSchema, { signal }),
  });
}

/** Where the manifest is downloaded from. */
export function manifestUrl(projectId: string, form: "json" | "csv"): string {
  return `/api/projects/${projectId}/manifest${form === "csv" ? ".csv" : ""}?download=1`;
}
