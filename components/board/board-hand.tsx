"use client";

import { useState, type ReactNode } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { DragLayer } from "@/components/board/drag-layer";
import { Hand, HandContext } from "@/components/board/hand";
import { MoveDialog } from "@/components/board/move-dialog";
import type { BoardIndex } from "@/lib/board/board-index";

interface BoardHandProps {
  readonly index: BoardIndex;
  readonly children: ReactNode;
}

/** Gives the board's parts a hand: what is selected and picked up, dragging, and the "Move to" window. */
export function BoardHand({ index, children }: BoardHandProps) {
  const [hand] = useState(() => new Hand());
  const { canEdit } = useBoardCommands();
  return (
    <HandContext value={hand}>
      {canEdit ? <DragLayer index={index}>{children}</DragLayer> : children}
      {canEdit && <MoveDialog index={index} />}
    </HandContext>
  );
}
