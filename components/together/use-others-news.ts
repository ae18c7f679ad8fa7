"use client";

import { skipToken, useQuery } from "@tanstack/react-query";
import { useEffect, useRef } from "react";
import type { Said } from "@/components/together/use-board-work";
import type { ToldStep } from "@/lib/board/command-answers";
import { boardKeys } from "@/lib/board/queries";

/** Says what others do to the board while it is open: "Jonas moved HARB0019 from A3 to A4". */
export function useOthersNews(input: {
  readonly projectId: string;
  readonly userId: string;
  readonly say: (text: string, tone: Said["tone"]) => void;
}): void {
  const { projectId, userId, say } = input;
  // Nobody asks for it: what brings the board up to date leaves it there.
  const { data } = useQuery<readonly ToldStep[]>({ queryKey: boardKeys.told(projectId), queryFn: skipToken });
  const saidUpTo = useRef(0);
  useEffect(() => {
    const news = (data ?? []).filter(({ revision, person }) => revision > saidUpTo.current && person.id !== userId);
    saidUpTo.current = Math.max(saidUpTo.current, ...(data ?? []).map(({ revision }) => revision));
    if (news.length > 0) say(news.map(({ person, sentence }) => `${person.name} ${sentence}`).join(". "), "news");
  }, [data, userId, say]);
}
