import { applyChanges, ChangeConflict, invertChanges, type Change } from "@/lib/board/changes";
import type { BoardCommand } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";

/** A command that a person gave and that the confirmed board may not hold yet. */
export interface WaitingCommand {
  readonly command: BoardCommand;
  /** The revision that recorded it; null: not answered yet. */
  readonly revision: number | null;
  /** What it changed, once answered. */
  readonly changes: readonly Change[] | null;
}

/**
 * The board as its person sees it: what the server confirmed, and on top of it what they asked for meanwhile.
 * A command whose revision the confirmed board has reached is in it already. One that cannot be planned (any more)
 * shows nothing: the server says what becomes of it.
 * @param waiting - in the order given
 */
export function showWaiting(confirmed: Board, waiting: readonly WaitingCommand[]): Board {
  const changesOf = new Map<string, readonly Change[]>();
  let board = confirmed;
  for (const { command, revision, changes } of waiting) {
    if (changes) changesOf.set(command.id, changes);
    if (revision !== null && revision <= confirmed.revision) continue;
    try {
      const planned = changes ?? planWaiting(board, command, changesOf);
      board = applyChanges(board, planned);
      changesOf.set(command.id, planned);
    } catch (error) {
      if (!(error instanceof ChangeConflict)) throw error;
    }
  }
  return board;
}

/** An undo is shown at once where it is known what it takes back: one's own commands since the page was opened. */
function planWaiting(
  board: Board,
  command: BoardCommand,
  changesOf: ReadonlyMap<string, readonly Change[]>,
): readonly Change[] {
  if (command.type === "undo") return invertChanges(changesOf.get(command.commandId) ?? []);
  return command.type === "undo-back-to" ? [] : planCommand(board, command);
}
