"use client";

import { useBoardCommands } from "@/components/board/board-commands";
import { MenuItem } from "@/components/ui/menu";
import { SET_ASIDE_REASONS } from "@/lib/sorting/types";

/** One item of a menu for each reason. */
export function SetAsideItems({ frameIds }: { readonly frameIds: readonly string[] }) {
  const { run } = useBoardCommands();
  return SET_ASIDE_REASONS.map((reason) => (
    <MenuItem key={reason} onSelect={() => run({ type: "set-aside", frameIds: [...frameIds], reason })}>
      Set aside {reason === "by hand" ? reason : `as ${reason}`}
    </MenuItem>
  ));
}
