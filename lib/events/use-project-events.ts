"use client";
import { type QueryClient, useQueryClient } from "@tanstack/react-query";
import { useEffect } from "react";
import { boardKeys, catchUpBoard } from "@/lib/board/queries";
import { eventsUrl, type ProjectEvent, projectEventSchema, STREAM_EVENT_NAME } from "@/lib/events/schema";
import { frameKeys } from "@/lib/frames/queries";
import { presenceKeys } from "@/lib/presence/queries";
import { projectKeys } from "@/lib/projects/queries";

/** Many files in a second must not be as many fetches, ms. */
const GATHER_MS = 1_000;

/**
 * Keeps what a page shows of a project fresh. One stream a browser and project: browsers hold six connections to a
 * host (HTTP/1.1), so the tab that has the lock listens and tells the others.
 */
export function useProjectEvents(projectId: string): void {
  const client = useQueryClient();
  useEffect(() => {
    const invalidations = gatherInvalidations(client, projectId);
    const stop = listen(projectId, invalidations.add);
    return () => {
      stop();
      invalidations.stop();
    };
  }, [client, projectId]);
}

function listen(projectId: string, tell: (event: ProjectEvent) => void): () => void {
  const name = `stackyard-events-${projectId}`;
  const channel = new BroadcastChannel(name);
  channel.onmessage = ({ data }) => {
    const event = projectEventSchema.safeParse(data);
    if (event.success) tell(event.data);
  };
  const leaving = new AbortController();
  const follow = () =>
    openStream(projectId, leaving.signal, (event) => {
      tell(event);
      channel.postMessage(event);
    });
  // Without locks (plain HTTP from another machine) every tab listens for itself.
  if ("locks" in navigator) navigator.locks.request(name, { signal: leaving.signal }, follow).catch(() => undefined);
  else void follow();
  return () => {
    leaving.abort();
    channel.close();
  };
}

/** Listens until `signal` is aborted. EventSource reconnects by itself and says what it has seen. */
function openStream(projectId: string, signal: AbortSignal, tell: (event: ProjectEvent) => void): Promise<void> {
  return new Promise((resolve) => {
    const source = new EventSource(eventsUrl(projectId));
    source.addEventListener(STREAM_EVENT_NAME, ({ data }: MessageEvent<string>) => {
      const event = projectEventSchema.safeParse(JSON.parse(data));
      if (event.success) tell(event.data);
    });
    const close = () => {
      source.close();
      resolve();
    };
    if (signal.aborted) close();
    else signal.addEventListener("abort", close, { once: true });
  });
}

function gatherInvalidations(client: QueryClient, projectId: string) {
  let timer: ReturnType<typeof setTimeout> | null = null;
  const flush = () => {
    timer = null;
    void client.invalidateQueries({ queryKey: frameKeys.all(projectId) });
    // What the job ticket says follows from files and board alike.
    void client.invalidateQueries({ queryKey: projectKeys.all(projectId) });
  };
  return {
    add(event: ProjectEvent) {
      if (event.type === "people.moved") {
        void client.invalidateQueries({ queryKey: presenceKeys.all(projectId) });
        return;
      }
      // People wait for each other's changes: these are not gathered.
      if (event.type === "board.changed") followBoard(client, projectId, event.revision);
      if (event.type === "missed") followBoard(client, projectId, Infinity);
      timer ??= setTimeout(flush, GATHER_MS);
    },
    stop() {
      if (timer) clearTimeout(timer);
    },
  };
}

function followBoard(client: QueryClient, projectId: string, revision: number): void {
  // Where it cannot be fetched now, the next event or the next look at the page asks again.
  catchUpBoard(client, projectId, revision).catch(() => undefined);
  void client.invalidateQueries({ queryKey: boardKeys.undo(projectId) });
  void client.invalidateQueries({ queryKey: boardKeys.record(projectId) });
}
