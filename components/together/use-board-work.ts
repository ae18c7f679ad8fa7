"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useCallback, useMemo, useState, useSyncExternalStore } from "react";
import type { BoardCommands } from "@/components/board/board-commands";
import type { QueueState, Refusal } from "@/components/together/command-queue";
import { queueOf } from "@/components/together/queue-of";
import { type UndoStep, useUndo } from "@/components/together/use-undo";
import { applyChanges, ChangeConflict } from "@/lib/board/changes";
import { boardCommandSchema, type BoardCommand, type CommandDraft } from "@/lib/board/command-schema";
import { withExpectations } from "@/lib/board/expectations";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { describeCommand, describeUndo } from "@/lib/board/sentence";
import { showWaiting } from "@/lib/board/show-waiting";
import { describeSubjects } from "@/lib/board/subject-words";
import { newId } from "@/lib/ids";

/** Something said to the person; `key` tells two equal ones apart. */
export interface Said {
  readonly key: number;
  readonly text: string;
  /** problem: what was asked for cannot be done; aloud: for those who do not see the board. */
  readonly tone: "news" | "problem" | "aloud";
}

export interface BoardWork {
  /** As its person sees it: confirmed, with what they asked for meanwhile. */
  readonly board: Board | undefined;
  readonly commands: BoardCommands;
  readonly queue: QueueState;
  readonly said: Said | null;
  readonly say: (text: string, tone: Said["tone"]) => void;
  readonly answer: (refusal: Refusal, answer: "leave" | "again") => void;
}

interface WorkInput {
  readonly projectId: string;
  readonly userId: string;
  readonly canEdit: boolean;
  /** As the server confirmed it. */
  readonly confirmed: Board | undefined;
}

const NOBODY = () => "somebody";

/** A person's work on the board: gives commands, shows them at once, undoes them, and says what came of them. */
export function useBoardWork({ projectId, userId, canEdit, confirmed }: WorkInput): BoardWork {
  const client = useQueryClient();
  const queue = queueOf(client, userId, projectId);
  const state = useSyncExternalStore(queue.subscribe, queue.getState, queue.getState);
  const { said, say } = useSaid();
  const board = useMemo(() => confirmed && showWaiting(confirmed, state.commands), [confirmed, state.commands]);

  const give = useCallback(
    (command: BoardCommand, sentence: string, shown: Board) =>
      queue.add({ command, sentence, seen: describeSubjects(shown, command), givenAtMs: Date.now() }),
    [queue],
  );
  const run = useCallback(
    (draft: CommandDraft): boolean => {
      if (!board || !canEdit) return false;
      const planned = plan(board, draft);
      if ("problem" in planned) say(planned.problem, "problem");
      else if (planned.sentence === null) say("It is so already.", "aloud");
      else {
        give(planned.command, planned.sentence, board);
        say(capital(planned.sentence), "aloud");
      }
      return !("problem" in planned);
    },
    [board, canEdit, give, say],
  );
  const takeBack = useCallback(
    ({ commandId, sentence }: UndoStep) => {
      if (!board) return;
      const command = { id: newId(), revision: board.revision, type: "undo", commandId } as const;
      give(command, describeUndo(sentence), board);
      say(capital(describeUndo(sentence)), "aloud");
    },
    [board, give, say],
  );
  const { undoable, redoable, press } = useUndo({
    projectId,
    isEnabled: canEdit,
    queue,
    commands: state.commands,
    takeBack,
  });
  const commands = useMemo(
    (): BoardCommands => ({
      canEdit,
      run,
      undoable: undoable?.sentence ?? null,
      redoable: redoable?.sentence ?? null,
      undo: () => press("undo"),
      redo: () => press("redo"),
      announce: (message) => say(message, "aloud"),
    }),
    [canEdit, run, undoable?.sentence, redoable?.sentence, press, say],
  );
  const answer = (refusal: Refusal, chosen: "leave" | "again") => {
    if (chosen === "again" && refusal.isRepeatable) return queue.repeat(refusal);
    queue.dismiss(refusal);
    if (chosen === "again") run(draftOf(refusal.given.command));
  };
  return { board, commands, queue: state, said, say, answer };
}

type Planned =
  | { readonly problem: string }
  /** Null: nothing to do. */
  | { readonly command: BoardCommand; readonly sentence: string | null };

function plan(board: Board, draft: CommandDraft): Planned {
  const expecting = withExpectations(board, draft);
  const command = boardCommandSchema.parse({ ...expecting, id: newId(), revision: board.revision });
  if (command.type === "undo" || command.type === "undo-back-to") return { command, sentence: "took steps back" };
  try {
    const changes = planCommand(board, command);
    const after = applyChanges(board, changes);
    if (changes.length === 0) return { command, sentence: null };
    return { command, sentence: describeCommand(command, { before: board, after, nameOf: NOBODY }) };
  } catch (error) {
    if (error instanceof ChangeConflict) return { problem: error.message };
    throw error;
  }
}

/** What was asked for, without what was seen then: that is filled in anew. */
function draftOf(command: BoardCommand): CommandDraft {
  const { id: _id, revision: _revision, ...draft } = command;
  return draft;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

function useSaid() {
  const [said, setSaid] = useState<Said | null>(null);
  const say = useCallback(
    (text: string, tone: Said["tone"]) => setSaid((before) => ({ key: (before?.key ?? 0) + 1, text, tone })),
    [],
  );
  return { said, say };
}
