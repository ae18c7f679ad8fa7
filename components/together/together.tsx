"use client";

import type { ReactNode } from "react";
import { BoardCommandsContext } from "@/components/board/board-commands";
import { RefusalDialog } from "@/components/together/refusal-dialog";
import { SaidLine } from "@/components/together/said-line";
import { PeopleOnTilesContext } from "@/components/together/tile-people";
import type { BoardWork } from "@/components/together/use-board-work";
import { useOthersNews } from "@/components/together/use-others-news";
import { usePeopleOnTiles, usePresence } from "@/components/together/use-presence";
import type { Board } from "@/lib/board/model";

interface TogetherProps {
  readonly projectId: string;
  readonly userId: string;
  readonly work: BoardWork;
  readonly board: Board;
  /** The tile that is open. */
  readonly chosen: string | null;
  readonly children: ReactNode;
}

/** Round the board: gives its parts the commands and who is where, and says what others did and what was refused. */
export function Together({ projectId, userId, work, board, chosen, children }: TogetherProps) {
  useOthersNews({ projectId, userId, revision: board.revision, say: work.say });
  usePresence(projectId, chosen);
  return (
    <BoardCommandsContext value={work.commands}>
      <PeopleOnTilesContext value={usePeopleOnTiles(projectId, userId)}>
        {children}
        <SaidLine said={work.said} />
        <RefusalDialog board={board} refusals={work.queue.refusals} onAnswer={work.answer} />
      </PeopleOnTilesContext>
    </BoardCommandsContext>
  );
}
