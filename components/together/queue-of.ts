import type { QueryClient } from "@tanstack/react-query";
import { CommandQueue } from "@/components/together/command-queue";
import { KeptCommands } from "@/components/together/kept-commands";
import type { CommandAnswer } from "@/lib/board/command-answers";
import { sendCommand } from "@/lib/board/mutations";
import { boardKeys, catchUpBoard, takeStep, undoQuery } from "@/lib/board/queries";

// A queue outlives the page that filled it: somebody who goes to another view has their changes sent all the same.
const queues = new WeakMap<QueryClient, Map<string, CommandQueue>>();

/** The one queue of a person and project in this page's life. */
export function queueOf(client: QueryClient, userId: string, projectId: string): CommandQueue {
  const ofClient = queues.get(client) ?? new Map<string, CommandQueue>();
  queues.set(client, ofClient);
  const key = `${userId}/${projectId}`;
  const queue = ofClient.get(key) ?? makeQueue(client, userId, projectId);
  ofClient.set(key, queue);
  return queue;
}

function makeQueue(client: QueryClient, userId: string, projectId: string): CommandQueue {
  const queue: CommandQueue = new CommandQueue({
    send: (command) => sendCommand(projectId, command, userId),
    kept: new KeptCommands(browserStorage(), userId, projectId),
    now: () => Date.now(),
    onAnswer(answer) {
      noteStep(client, projectId, queue, answer);
      // A difference that could not be fetched is asked for again with the next event.
      takeStep(client, projectId, answer).catch(() => undefined);
    },
    onRefused({ conflict }) {
      void client.invalidateQueries({ queryKey: boardKeys.undo(projectId) });
      catchUpBoard(client, projectId, conflict?.revision ?? Infinity).catch(() => undefined);
    },
  });
  return queue;
}

/** One's newest step is the next to be undone, a taking back the next to be redone; what lies under it is asked for. */
function noteStep(client: QueryClient, projectId: string, queue: CommandQueue, { id }: CommandAnswer): void {
  const given = queue.getState().commands.find(({ command }) => command.id === id);
  const { queryKey } = undoQuery(projectId);
  if (given && given.command.type !== "undo-back-to") {
    const step = { commandId: id, sentence: given.sentence };
    const isTakingBack = given.command.type === "undo" && !given.sentence.startsWith("redid");
    client.setQueryData(queryKey, isTakingBack ? { undo: null, redo: step } : { undo: step, redo: null });
  }
  void client.invalidateQueries({ queryKey });
}

/** Null where the browser forbids it. */
function browserStorage(): Storage | null {
  try {
    return typeof window === "undefined" ? null : window.localStorage;
  } catch {
    return null;
  }
}
