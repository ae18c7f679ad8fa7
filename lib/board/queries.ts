import { infiniteQueryOptions, type QueryClient, queryOptions, replaceEqualDeep } from "@tanstack/react-query";
import type { z } from "zod";
import { applyChanges, type Change } from "@/lib/board/changes";
import {
  boardSinceSchema,
  type RecordEntry,
  type RecordPage,
  recordSchema,
  undoStateSchema,
} from "@/lib/board/command-answers";
import type { Board } from "@/lib/board/model";
import { boardSchema } from "@/lib/board/schema";
import { standingAfter } from "@/lib/board/standing";
import { fetchJson } from "@/lib/http/fetch-json";

export const boardKeys = {
  all: (projectId: string) => ["projects", projectId, "board"] as const,
  board: (projectId: string) => ["projects", projectId, "board", "whole"] as const,
  since: (projectId: string, revision: number) => ["projects", projectId, "board", "since", revision] as const,
  /** What others did lately, as far as this page was told. */
  told: (projectId: string) => ["projects", projectId, "board", "told"] as const,
  record: (projectId: string) => ["projects", projectId, "board", "record"] as const,
  undo: (projectId: string) => ["projects", projectId, "board", "undo"] as const,
};

/** The whole board. The browser revalidates by ETag: an unchanged board costs a 304. */
export function boardQuery(projectId: string) {
  return queryOptions({
    queryKey: boardKeys.board(projectId),
    queryFn: ({ signal }) => fetchJson(`/api/projects/${projectId}/board?texts=tokens`, boardSchema, { signal }),
    structuralSharing: keepNewer,
  });
}

/** An answer that was on its way while newer changes came in must not take them back. */
function keepNewer(known: unknown, answer: unknown): unknown {
  return revisionOf(known) > revisionOf(answer) ? known : replaceEqualDeep(known, answer);
}

function revisionOf(board: unknown): number {
  const isBoard = typeof board === "object" && board !== null && "revision" in board;
  return isBoard && typeof board.revision === "number" ? board.revision : -1;
}

/** What the signed-in person's next undo and redo would take back. */
export function undoQuery(projectId: string) {
  return queryOptions({
    queryKey: boardKeys.undo(projectId),
    queryFn: ({ signal }) => fetchJson(`/api/projects/${projectId}/record/mine`, undoStateSchema, { signal }),
  });
}

export interface RecordFilter {
  /** Id of the person; null: anybody. */
  readonly person: string | null;
  /** Name of the tile; null: any, and steps that touched none. */
  readonly tile: string | null;
}

/** The change record, newest first, a page of 100 after another. */
export function recordQuery(projectId: string, filter: RecordFilter) {
  return infiniteQueryOptions({
    queryKey: [...boardKeys.record(projectId), filter],
    queryFn: ({ pageParam, signal }) => fetchRecord(projectId, { ...filter, before: pageParam }, signal),
    initialPageParam: null as number | null,
    getNextPageParam: ({ next }) => next,
  });
}

function fetchRecord(
  projectId: string,
  { person, tile, before }: RecordFilter & { readonly before: number | null },
  signal?: AbortSignal,
) {
  const query = new URLSearchParams();
  if (person !== null) query.set("person", person);
  if (tile !== null) query.set("tile", tile);
  if (before !== null) query.set("before", String(before));
  return fetchJson(`/api/projects/${projectId}/record?${query}`, recordSchema, { signal });
}

/** How many steps going back to a revision undoes, and whose they are. */
export function stepsAfterQuery(projectId: string, revision: number) {
  return queryOptions({
    queryKey: [...boardKeys.record(projectId), "after", revision],
    queryFn: async ({ signal }) => {
      const all: RecordEntry[] = [];
      let before: number | null = null;
      do {
        const page: RecordPage = await fetchRecord(projectId, { person: null, tile: null, before }, signal);
        const later = page.entries.filter((entry) => entry.revision > revision);
        all.push(...later);
        before = later.length < page.entries.length ? null : page.next;
      } while (before !== null);
      const counts = new Map<string, number>();
      for (const { person } of standingAfter(revision, all)) {
        const name = person?.name ?? "Stackyard";
        counts.set(name, (counts.get(name) ?? 0) + 1);
      }
      return [...counts].map(([name, count]) => ({ name, count }));
    },
    staleTime: 0,
  });
}

/** A step that the server made: onto the known board where it follows, else what is missing is asked for. */
export function takeStep(
  client: QueryClient,
  projectId: string,
  step: { readonly revision: number; readonly changes: readonly Change[] },
): Promise<void> {
  const known = client.getQueryData(boardQuery(projectId).queryKey);
  if (known?.revision === step.revision - 1) {
    const next = applied(known, step.changes, step.revision);
    if (next) client.setQueryData(boardQuery(projectId).queryKey, next);
  }
  return catchUpBoard(client, projectId, step.revision);
}

/**
 * Brings a board that is known to at least `revision`, by the difference. A board that nobody has asked for stays
 * unknown. Callers that know the same share one request.
 */
export async function catchUpBoard(client: QueryClient, projectId: string, revision: number): Promise<void> {
  const { queryKey } = boardQuery(projectId);
  for (;;) {
    const known = client.getQueryData(queryKey);
    if (!known || known.revision >= revision) return;
    const answer = await client.fetchQuery({
      queryKey: boardKeys.since(projectId, known.revision),
      queryFn: ({ signal }) =>
        fetchJson(`/api/projects/${projectId}/board?since=${known.revision}`, boardSinceSchema, { signal }),
      staleTime: 0,
      gcTime: 0,
      retry: 2,
    });
    client.setQueryData(queryKey, (now) => now && afterDifference(now, answer));
    if ("told" in answer) client.setQueryData(boardKeys.told(projectId), answer.told);
    const now = client.getQueryData(queryKey);
    if (now && now.revision > known.revision) continue;
    // The difference did not fit what is known, or the server knows of nothing newer: all of it once.
    return client.invalidateQueries({ queryKey });
  }
}

function afterDifference(known: Board, answer: z.infer<typeof boardSinceSchema>): Board {
  if ("unchanged" in answer || answer.revision <= known.revision) return known;
  if (!("changes" in answer)) {
    const { full: _full, ...board } = answer;
    return board;
  }
  return (answer.since === known.revision && applied(known, answer.changes, answer.revision)) || known;
}

/** Null: they do not fit this board. */
function applied(board: Board, changes: readonly Change[], revision: number): Board | null {
  try {
    return { ...applyChanges(board, changes), revision };
  } catch {
    return null;
  }
}

/** Where the manifest is downloaded from. */
export function manifestUrl(projectId: string, form: "json" | "csv"): string {
  return `/api/projects/${projectId}/manifest${form === "csv" ? ".csv" : ""}?download=1`;
}
