"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useEffect, useMemo } from "react";
import { useOnline } from "@/components/ui/use-online";
import { presenceQuery, sendLeaving, sendPresence } from "@/lib/presence/queries";

/** A third of what the server takes for silence (45 s), ms: two words may be lost. */
const AGAIN_MS = 15_000;

/** Lets the others know that one is here, and on which tile. */
export function usePresence(projectId: string, tile: string | null): void {
  const client = useQueryClient();
  useEffect(() => {
    const tell = () => {
      // A tab in the background is nobody at the board.
      if (document.hidden) return;
      sendPresence(projectId, tile)
        .then((present) => client.setQueryData(presenceQuery(projectId).queryKey, present))
        // Said again soon; what is out of reach is shown elsewhere.
        .catch(() => undefined);
    };
    tell();
    const timer = setInterval(tell, AGAIN_MS);
    document.addEventListener("visibilitychange", tell);
    return () => {
      clearInterval(timer);
      document.removeEventListener("visibilitychange", tell);
    };
  }, [client, projectId, tile]);
  useEffect(() => {
    const leave = () => sendLeaving(projectId);
    window.addEventListener("pagehide", leave);
    return () => {
      window.removeEventListener("pagehide", leave);
      leave();
    };
  }, [projectId]);
}

/** Who else has which tile open, by the tile's name. */
export function usePeopleOnTiles(projectId: string, userId: string): ReadonlyMap<string, readonly string[]> {
  const { data } = useQuery(presenceQuery(projectId));
  const isOnline = useOnline();
  return useMemo(() => {
    const names = new Map<string, string[]>();
    if (!isOnline) return names;
    for (const { userId: other, name, tile } of data?.people ?? []) {
      if (other !== userId && tile !== null) names.set(tile, [...(names.get(tile) ?? []), name]);
    }
    return names;
  }, [data, isOnline, userId]);
}
