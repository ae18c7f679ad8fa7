import { useState, type ReactNode } from "react";
import { BoardCommandsContext, type BoardCommands } from "@/components/board/board-commands";
import { applyChanges, ChangeConflict, invertChanges, type Change } from "@/lib/board/changes";
import type { CommandDraft, PlannedCommand } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";

interface LocalBoardProps {
  readonly board: Board;
  readonly canEdit?: boolean;
  readonly onRun?: (draft: CommandDraft) => void;
  readonly onAnnounce?: (message: string) => void;
  readonly children: (board: Board) => ReactNode;
}

/** A board that is changed as on the page, but kept in memory: the same planning, no server. */
export function LocalBoard({ board: first, canEdit = true, onRun, onAnnounce, children }: LocalBoardProps) {
  const [board, setBoard] = useState(first);
  const [done, setDone] = useState<readonly (readonly Change[])[]>([]);
  const announce = (message: string) => onAnnounce?.(message);
  const commands: BoardCommands = {
    canEdit,
    run: (draft) => {
      onRun?.(draft);
      try {
        const command = { ...draft, id: crypto.randomUUID(), revision: board.revision } as PlannedCommand;
        const changes = planCommand(board, command);
        setBoard(applyChanges(board, changes));
        setDone([...done, changes]);
        return true;
      } catch (error) {
        if (!(error instanceof ChangeConflict)) throw error;
        announce(error.message);
        return false;
      }
    },
    undoable: done.length > 0 ? "the last change" : null,
    redoable: null,
    undo: () => {
      setBoard(applyChanges(board, invertChanges(done.at(-1) ?? [])));
      setDone(done.slice(0, -1));
    },
    redo: () => undefined,
    announce,
  };
  return (
    <BoardCommandsContext value={commands}>
      {children(board)}
      <button type="button" onClick={commands.undo}>
        Take back
      </button>
    </BoardCommandsContext>
  );
}
