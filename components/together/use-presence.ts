"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect } from "react";
import { presenceQuery, sendPresence } from "@/lib/presence/queries";

/** Well within what the server takes for silence (45 s), ms. */
const AGAIN_MS = 20_000;

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
}
