"use client";

import { useSyncExternalStore } from "react";

/** Whether the browser has a connection at all; a server that does not answer is another matter. */
export function useOnline(): boolean {
  return useSyncExternalStore(
    subscribe,
    () => navigator.onLine,
    () => true,
  );
}

function subscribe(tell: () => void): () => void {
  window.addEventListener("online", tell);
  window.addEventListener("offline", tell);
  return () => {
    window.removeEventListener("online", tell);
    window.removeEventListener("offline", tell);
  };
}
