import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";

/**
 * The draft with what the person saw when they asked for it: where its frames were, what was set aside, which place
 * and which reference a stack had. The server refuses the command where that is no longer so. What is not on the
 * board, or has nothing to be compared, expects nothing.
 */
export function withExpectations(board: Board, draft: CommandDraft): CommandDraft {
  switch (draft.type) {
    case "move-frames":
      return { ...draft, expect: seenPlaces(board, new Set(draft.frameIds)) };
    case "split-stack": {
      const first = board.frames.find(({ id }) => id === draft.atFrameId)?.orderTaken ?? Infinity;
      const rest = board.frames.filter(({ stackId, orderTaken }) => stackId === draft.stackId && orderTaken >= first);
      return { ...draft, expect: seenPlaces(board, new Set(rest.map(({ id }) => id))) };
    }
    case "merge-stacks": {
      const merged = new Set(draft.stackIds);
      const frames = board.frames.filter(({ stackId }) => stackId !== null && merged.has(stackId));
      return { ...draft, expect: seenPlaces(board, new Set(frames.map(({ id }) => id))) };
    }
    case "place-stack": {
      const stack = board.stacks.find(({ id }) => id === draft.stackId);
      return stack ? { ...draft, expect: { row: stack.row, column: stack.column, take: stack.take } } : draft;
    }
    case "set-aside":
      return { ...draft, expect: seenSetAside(board, new Set(draft.frameIds)) };
    case "bring-back":
      return { ...draft, expect: seenSetAside(board, new Set(draft.frameIds)) };
    case "choose-reference": {
      const stack = board.stacks.find(({ id }) => id === draft.stackId);
      return stack ? { ...draft, expect: { referenceId: stack.referenceId } } : draft;
    }
    default:
      return draft;
  }
}

function seenPlaces(board: Board, ids: ReadonlySet<string>): Record<string, string | null> {
  return Object.fromEntries(board.frames.flatMap(({ id, stackId }) => (ids.has(id) ? [[id, stackId]] : [])));
}

function seenSetAside(board: Board, ids: ReadonlySet<string>) {
  return Object.fromEntries(board.frames.flatMap(({ id, setAside }) => (ids.has(id) ? [[id, setAside]] : [])));
}
