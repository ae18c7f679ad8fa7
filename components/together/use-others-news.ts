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
  /** Of the board that is shown. */
  readonly revision: number;
  readonly say: (text: string, tone: Said["tone"]) => void;
}): void {
  const { projectId, userId, revision, say } = input;
  // Nobody asks for it: what brings the board up to date leaves it there.
  const { data } = useQuery<readonly ToldStep[]>({ queryKey: boardKeys.told(projectId), queryFn: skipToken });
  // What the board showed already when it was opened is no news.
  const saidUpTo = useRef(revision);
  useEffect(() => {
    const news = (data ?? []).filter((step) => step.revision > saidUpTo.current && step.person.id !== userId);
    saidUpTo.current = Math.max(saidUpTo.current, ...(data ?? []).map((step) => step.revision));
    if (news.length > 0) say(news.map(({ person, sentence }) => `${person.name} ${sentence}`).join(". "), "news");
  }, [data, userId, say]);
}
