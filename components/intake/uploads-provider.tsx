"use client";

import { useQueryClient } from "@tanstack/react-query";
import { createContext, useContext, useEffect, useState, useSyncExternalStore, type ReactNode } from "react";
import { boardKeys } from "@/lib/board/queries";
import { frameKeys } from "@/lib/frames/queries";
import { tusTransfers } from "@/lib/uploads/tus-transfer";
import { UploadQueue, type UploadSnapshot } from "@/lib/uploads/upload-queue";

/** The queues of this tab, one a project. */
class UploadQueues {
  #queues = new Map<string, UploadQueue>();

  of(projectId: string): UploadQueue {
    const known = this.#queues.get(projectId);
    if (known) return known;
    const queue = new UploadQueue(tusTransfers(projectId));
    this.#queues.set(projectId, queue);
    return queue;
  }

  each(act: (queue: UploadQueue) => void): void {
    for (const queue of this.#queues.values()) act(queue);
  }

  isUnfinished(): boolean {
    return [...this.#queues.values()].some((queue) => queue.isUnfinished());
  }
}

const QueuesContext = createContext<UploadQueues | null>(null);

/** Stands above all pages of somebody signed in, so that uploads go on whichever of them is open. */
export function UploadsProvider({ children }: { readonly children: ReactNode }) {
  const [queues] = useState(() => new UploadQueues());
  useEffect(() => {
    const offline = () => queues.each((queue) => queue.goOffline());
    const online = () => queues.each((queue) => queue.getSnapshot().hold?.kind === "offline" && queue.goOn());
    // Signing in again happens in another tab: coming back to this one is the moment to try.
    const seen = () => {
      if (document.visibilityState !== "visible") return;
      queues.each((queue) => queue.getSnapshot().hold?.kind === "signed-out" && queue.goOn());
    };
    const leaving = (event: BeforeUnloadEvent) => {
      if (queues.isUnfinished()) event.preventDefault();
    };
    window.addEventListener("offline", offline);
    window.addEventListener("online", online);
    window.addEventListener("focus", seen);
    document.addEventListener("visibilitychange", seen);
    window.addEventListener("beforeunload", leaving);
    return () => {
      window.removeEventListener("offline", offline);
      window.removeEventListener("online", online);
      window.removeEventListener("focus", seen);
      document.removeEventListener("visibilitychange", seen);
      window.removeEventListener("beforeunload", leaving);
    };
  }, [queues]);
  return <QueuesContext value={queues}>{children}</QueuesContext>;
}

/** The queue of a project and how far it is. */
export function useUploads(projectId: string): { queue: UploadQueue; snapshot: UploadSnapshot } {
  const queues = useContext(QueuesContext);
  if (!queues) throw new Error("useUploads needs UploadsProvider above it");
  const queue = queues.of(projectId);
  const snapshot = useSyncExternalStore(queue.subscribe, queue.getSnapshot, queue.getSnapshot);
  return { queue, snapshot };
}

/** Asks anew for what the server knows whenever another file is in. */
export function useFreshLists(projectId: string, doneCount: number): void {
  const client = useQueryClient();
  useEffect(() => {
    if (doneCount === 0) return;
    void client.invalidateQueries({ queryKey: frameKeys.all(projectId) });
    void client.invalidateQueries({ queryKey: boardKeys.all(projectId) });
  }, [client, projectId, doneCount]);
}
