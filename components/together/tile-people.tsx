"use client";

import { createContext, use } from "react";

/** Who else has which tile open, by the tile's name. */
export const PeopleOnTilesContext = createContext<ReadonlyMap<string, readonly string[]>>(new Map());

/** On paper in the picture's lower corner: who has this tile open. */
export function TilePeople({ tile }: { readonly tile: string }) {
  const names = use(PeopleOnTilesContext).get(tile);
  if (!names) return null;
  return (
    <span className="absolute right-0 bottom-0 max-w-full truncate border-t border-l border-line bg-paper px-1.5 text-[0.8125rem] leading-5 text-ink">
      {names.join(", ")}
    </span>
  );
}
