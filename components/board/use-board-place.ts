"use client";

import { usePathname, useSearchParams } from "next/navigation";
import { useCallback } from "react";

/** What `?tile=` names when the loose frames are open. */
export const LOOSE = "loose";

export type BoardViewName = "grid" | "table";

/**
 * What is chosen on the board, kept in the address: a link leads to the same tile, and Back closes what was opened.
 * The address is changed without asking the server: nothing of the page depends on it there.
 */
export function useBoardPlace() {
  const params = useSearchParams();
  const pathname = usePathname();
  const chosen = params.get("tile");
  const view: BoardViewName = params.get("view") === "table" ? "table" : "grid";

  const change = useCallback(
    (name: "tile" | "view", value: string | null) => {
      const next = new URLSearchParams(window.location.search);
      if (value === null) next.delete(name);
      else next.set(name, value);
      const query = next.toString();
      window.history.pushState(null, "", query === "" ? pathname : `${pathname}?${query}`);
    },
    [pathname],
  );

  const choose = useCallback((tile: string | null) => change("tile", tile), [change]);
  const show = useCallback((next: BoardViewName) => change("view", next === "grid" ? null : next), [change]);
  return { chosen, choose, view, show };
}
