import { useSyncExternalStore } from "react";

/** Pixels of the screen for each CSS pixel: 1, 2 on a dense screen, 1.25 where the browser is zoomed to 125 %. */
export function useScreenDensity(): number {
  return useSyncExternalStore(
    subscribe,
    () => window.devicePixelRatio || 1,
    () => 1,
  );
}

/** Zooming, and moving to another screen, change the size of the page in CSS pixels. */
function subscribe(onChange: () => void): () => void {
  window.addEventListener("resize", onChange);
  return () => window.removeEventListener("resize", onChange);
}
