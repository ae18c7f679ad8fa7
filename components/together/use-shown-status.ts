"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect } from "react";
import type { BoardIndex } from "@/lib/board/board-index";
import { projectKeys, shownStatusKey } from "@/lib/projects/queries";

/** Lets ticket and header say what the open board shows, changes that wait included. */
export function useShownStatus(projectId: string, index: BoardIndex | null): void {
  const client = useQueryClient();
  useEffect(() => {
    if (!index) return;
    const { board, tiles } = index;
    const { rows, columns } = board.grid;
    client.setQueryData(shownStatusKey(projectId), {
      tiles: tiles.size,
      openQuestions: board.questions.length,
      rows,
      columns,
    });
  }, [client, projectId, index]);
  useEffect(() => {
    return () => {
      client.setQueryData(shownStatusKey(projectId), null);
      void client.invalidateQueries({ queryKey: projectKeys.status(projectId) });
    };
  }, [client, projectId]);
}
