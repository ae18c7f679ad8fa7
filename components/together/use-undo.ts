"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useCallback, useRef } from "react";
import type { CommandQueue, QueuedCommand } from "@/components/together/command-queue";
import type { UndoState } from "@/lib/board/command-answers";
import { undoQuery } from "@/lib/board/queries";

export type UndoKind = "undo" | "redo";
export type UndoStep = NonNullable<UndoState["undo"]>;

interface UndoSteps {
  readonly undoable: UndoStep | null;
  readonly redoable: UndoStep | null;
  /** Takes back now, or as soon as it is known what comes next. */
  readonly press: (kind: UndoKind) => void;
}

interface UndoInput {
  readonly projectId: string;
  readonly isEnabled: boolean;
  readonly queue: CommandQueue;
  readonly commands: readonly QueuedCommand[];
  readonly takeBack: (step: UndoStep) => void;
}

const NOTHING: UndoState = { undo: null, redo: null };

/** One's next undo and redo: what the server recorded, and on top of it what still waits to be sent. */
export function useUndo({ projectId, isEnabled, queue, commands, takeBack }: UndoInput): UndoSteps {
  const client = useQueryClient();
  const recorded = useQuery({ ...undoQuery(projectId), enabled: isEnabled });
  const { undo, redo } = nextSteps(recorded.data ?? NOTHING, commands);
  // Keys are pressed faster than the server answers: each press waits for what the one before it laid open.
  const presses = useRef(Promise.resolve());
  const press = useCallback(
    (kind: UndoKind) => {
      const next = () =>
        nextSteps(client.getQueryData(undoQuery(projectId).queryKey) ?? NOTHING, queue.getState().commands);
      presses.current = presses.current.then(async () => {
        if (next()[kind] === null && queue.getState().connection === "fine") {
          await queue.whenIdle();
          await client.fetchQuery({ ...undoQuery(projectId), staleTime: 0 }).catch(() => undefined);
        }
        const step = next()[kind];
        if (step) takeBack(step);
      });
    },
    [client, projectId, queue, takeBack],
  );
  return { undoable: undo, redoable: redo, press };
}

/** Pure: a new command is the next to be undone and leaves nothing to redo; a taking back is the next to be redone. */
export function nextSteps(recorded: UndoState, commands: readonly QueuedCommand[]): UndoState {
  let undos = recorded.undo ? [recorded.undo] : [];
  let redos = recorded.redo ? [recorded.redo] : [];
  for (const { command, sentence, revision } of commands) {
    if (revision !== null) continue;
    const step = { commandId: command.id, sentence };
    if (command.type !== "undo") {
      undos = [...undos, step];
      redos = [];
      continue;
    }
    const isTaken = ({ commandId }: UndoStep) => commandId === command.commandId;
    const isRedo = redos.some(isTaken);
    undos = isRedo ? [...undos, step] : undos.filter((each) => !isTaken(each));
    redos = isRedo ? redos.filter((each) => !isTaken(each)) : [...redos, step];
  }
  return { undo: undos.at(-1) ?? null, redo: redos.at(-1) ?? null };
}
