import { useState, type ReactNode } from "react";
import { BoardCommandsContext, type BoardCommands } from "@/components/board/board-commands";
import { applyChanges, ChangeConflict, invertChanges, type Change } from "@/lib/board/changes";
import type { CommandDraft, PlannedCommand } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { describeCommand } from "@/lib/board/sentence";

interface LocalBoardProps {
  readonly board: Board;
  readonly canEdit?: boolean;
  readonly onRun?: (draft: CommandDraft) => void;
  readonly onAnnounce?: (message: string) => void;
  readonly children: (board: Board) => ReactNode;
}

interface Done {
  readonly changes: readonly Change[];
  readonly sentence: string;
}

/** A board that is changed as on the page, but kept in memory: the same planning, no server. */
export function LocalBoard({ board: first, canEdit = true, onRun, onAnnounce, children }: LocalBoardProps) {
  const [board, setBoard] = useState(first);
  const [done, setDone] = useState<readonly Done[]>([]);
  const announce = (message: string) => onAnnounce?.(message);
  const commands: BoardCommands = {
    canEdit,
    run: (draft) => {
      onRun?.(draft);
      try {
        const command = { ...draft, id: crypto.randomUUID(), revision: board.revision } as PlannedCommand;
        const changes = planCommand(board, command);
        const after = applyChanges(board, changes);
        setBoard(after);
        setDone([
          ...done,
          { changes, sentence: describeCommand(command, { before: board, after, nameOf: () => "somebody" }) },
        ]);
        return true;
      } catch (error) {
        if (!(error instanceof ChangeConflict)) throw error;
        announce(error.message);
        return false;
      }
    },
    undoable: done.at(-1)?.sentence ?? null,
    redoable: null,
    undo: () => {
      setBoard(applyChanges(board, invertChanges(done.at(-1)?.changes ?? [])));
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
