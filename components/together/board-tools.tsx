"use client";

import { useBoardCommands } from "@/components/board/board-commands";
import { SelectMenu } from "@/components/board/select-menu";
import { FrameFinder } from "@/components/together/frame-finder";
import { SortAnew } from "@/components/together/sort-anew";
import { UndoButtons } from "@/components/together/undo-buttons";
import type { BoardIndex } from "@/lib/board/board-index";

interface BoardToolsProps {
  readonly index: BoardIndex;
  /** The tile that is open. */
  readonly chosen: string | null;
  readonly onChoose: (tile: string) => void;
}

/** What the bar over the board offers besides how it is drawn. */
export function BoardTools({ index, chosen, onChoose }: BoardToolsProps) {
  const { canEdit } = useBoardCommands();
  return (
    <>
      <FrameFinder index={index} onChoose={onChoose} />
      {canEdit && <SelectMenu index={index} chosen={chosen} />}
      <SortAnew projectId={index.board.projectId} />
      <UndoButtons />
    </>
  );
}
