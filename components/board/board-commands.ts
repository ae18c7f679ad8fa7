"use client";

import { createContext, use } from "react";
import type { CommandDraft } from "@/lib/board/command-schema";

/** What the board's parts need to change it. The board they are given shows what was asked for at once. */
export interface BoardCommands {
  /** Editors and leads of a project that is not in the archive. */
  readonly canEdit: boolean;
  /**
   * Plans the command on the board as it is shown, shows it and sends it. What cannot be done is said to the person,
   * in words, and nothing is sent.
   * @returns whether it was planned
   */
  readonly run: (draft: CommandDraft) => boolean;
  /** What "Undo" would take back, in words; null: nothing. */
  readonly undoable: string | null;
  readonly redoable: string | null;
  readonly undo: () => void;
  readonly redo: () => void;
  /** Says something to screen readers: names of tiles and frames. */
  readonly announce: (message: string) => void;
}

export const BoardCommandsContext = createContext<BoardCommands | null>(null);

/** @throws Error outside of the board page */
export function useBoardCommands(): BoardCommands {
  const commands = use(BoardCommandsContext);
  if (!commands) throw new Error("There is no board here.");
  return commands;
}
