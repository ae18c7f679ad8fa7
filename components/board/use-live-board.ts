"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useEffect } from "react";
import type { Board } from "@/lib/board/model";
import { boardKeys, boardQuery } from "@/lib/board/queries";
import { intakeQuery, progressQuery } from "@/lib/frames/queries";
import type { Progress } from "@/lib/frames/schema";

/** While frames are coming in or being sorted, and when all is quiet. */
const BUSY_MS = 1_500;
const QUIET_MS = 10_000;

interface LiveBoard {
  readonly board: Board | undefined;
  readonly progress: Progress | undefined;
  /** The board is being asked for: what is known may be older than the progress. */
  readonly isFetching: boolean;
  /** Why the last sorting failed, in plain words; null: it did not. */
  readonly sortError: string | null;
  /** What went wrong when asking, in plain words; null: nothing. */
  readonly error: string | null;
  readonly retry: () => void;
}

/** The board and how far it is, kept up to date: progress is asked for again and again, the board when it moved. */
export function useLiveBoard(projectId: string): LiveBoard {
  const client = useQueryClient();
  const progress = useQuery({
    ...progressQuery(projectId),
    refetchInterval: (query) => (query.state.data?.sorted === false ? BUSY_MS : QUIET_MS),
  });
  const board = useQuery(boardQuery(projectId));
  const counts = progress.data;
  const isMeasured = counts !== undefined && counts.received > 0 && counts.analysed + counts.failed >= counts.received;
  const intake = useQuery({
    ...intakeQuery(projectId),
    enabled: isMeasured && !counts.sorted,
    refetchInterval: BUSY_MS,
  });

  // The board is asked for whenever the counts say that it may have moved; unchanged, the answer is a 304.
  const mark = counts ? `${counts.analysed} ${counts.failed} ${counts.sorted}` : null;
  useEffect(() => {
    if (mark !== null) void client.invalidateQueries({ queryKey: boardKeys.board(projectId) });
  }, [client, projectId, mark]);

  const failure = board.error ?? progress.error;
  return {
    board: board.data,
    progress: counts,
    isFetching: board.isFetching,
    sortError: isMeasured && !counts.sorted ? (intake.data?.sortError ?? null) : null,
    error: failure === null ? null : failure.message,
    retry: () => void Promise.all([board.refetch(), progress.refetch()]),
  };
}
