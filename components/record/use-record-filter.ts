"use client";

import { usePathname, useSearchParams } from "next/navigation";
import { useCallback } from "react";
import type { RecordFilter } from "@/lib/board/queries";

const TILE_NAME = /^[A-Z]{1,3}[1-9][0-9]{0,3}$/;

/** Whose steps, and on which tile: kept in the address, so that a link leads to the same. */
export function useRecordFilter() {
  const params = useSearchParams();
  const pathname = usePathname();
  const tile = params.get("tile");
  const filter: RecordFilter = { person: params.get("person"), tile: tile !== null && isTileName(tile) ? tile : null };
  const change = useCallback(
    (name: keyof RecordFilter, value: string | null) => {
      const next = new URLSearchParams(window.location.search);
      if (value === null || value === "") next.delete(name);
      else next.set(name, value);
      const query = next.toString();
      window.history.pushState(null, "", query === "" ? pathname : `${pathname}?${query}`);
    },
    [pathname],
  );
  return { filter, change };
}

export function isTileName(text: string): boolean {
  return TILE_NAME.test(text);
}
