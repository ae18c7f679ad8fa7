"use client";

import { useQuery } from "@tanstack/react-query";
import { useOnline } from "@/components/ui/use-online";
import { presenceQuery } from "@/lib/presence/queries";

/** As many names as fit beside the project's. */
const NAMES_MOST = 3;

/** At the page's head: who else has the board open. */
export function PeopleHere({ projectId, userId }: { readonly projectId: string; readonly userId: string }) {
  const { data } = useQuery(presenceQuery(projectId));
  // Without a connection nobody knows who is here.
  const others = (useOnline() ? (data?.people ?? []) : []).filter((person) => person.userId !== userId);
  return (
    <p role="status" className="text-sm text-quiet">
      {hereText(others.map(({ name }) => name))}
    </p>
  );
}

/** "Mona is here", "Mona and Jonas are here", "Mona, Jonas and 3 more are here". */
export function hereText(names: readonly string[]): string {
  if (names.length === 0) return "";
  const shown =
    names.length > NAMES_MOST ? [...names.slice(0, NAMES_MOST - 1), `${names.length - NAMES_MOST + 1} more`] : names;
  const list = shown.length === 1 ? shown[0] : `${shown.slice(0, -1).join(", ")} and ${shown.at(-1)}`;
  return `${list} ${names.length === 1 ? "is" : "are"} here`;
}
