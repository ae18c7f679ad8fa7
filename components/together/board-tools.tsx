import { FrameFinder } from "@/components/together/frame-finder";
import { SortAnew } from "@/components/together/sort-anew";
import { UndoButtons } from "@/components/together/undo-buttons";
import type { BoardIndex } from "@/lib/board/board-index";

interface BoardToolsProps {
  readonly index: BoardIndex;
  readonly onChoose: (tile: string) => void;
}

/** What the bar over the board offers besides how it is drawn. */
export function BoardTools({ index, onChoose }: BoardToolsProps) {
  return (
    <>
      <FrameFinder index={index} onChoose={onChoose} />
      <SortAnew projectId={index.board.projectId} />
      <UndoButtons />
    </>
  );
}
