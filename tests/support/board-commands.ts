import type { BoardCommands } from "@/components/board/board-commands";

/** The board as a viewer has it: nothing can be changed. Give what a test needs besides. */
export function makeBoardCommands(part: Partial<BoardCommands> = {}): BoardCommands {
  return {
    canEdit: false,
    run: () => false,
    undoable: null,
    redoable: null,
    undo: () => undefined,
    redo: () => undefined,
    announce: () => undefined,
    ...part,
  };
}
