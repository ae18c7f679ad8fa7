import type { FixedStack, SetAsideReason, SortFacts } from "@/lib/sorting/types";

/** A frame as it is on the board. */
export interface DecidedFrame {
  readonly id: string;
  /** Null: never sorted. */
  readonly orderTaken: number | null;
  readonly stackId: string | null;
  readonly setAside: SetAsideReason | null;
  readonly placedBy: "computation" | "person";
}

/** A stack as it is on the board. */
export interface DecidedStack {
  readonly id: string;
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number;
  readonly isChosenTake: boolean;
  readonly referenceId: string | null;
  readonly isSettled: boolean;
  readonly placedBy: "computation" | "person";
}

/** What people chose that the board itself does not tell from what was computed; from the change record. */
export interface PersonChoices {
  /** By stack. */
  readonly references: ReadonlyMap<string, string>;
  /** Stacks among whose takes somebody chose. */
  readonly takes: ReadonlySet<string>;
}

export interface DecidedBoard {
  readonly frames: readonly DecidedFrame[];
  readonly stacks: readonly DecidedStack[];
  readonly grid: { readonly rows: number; readonly columns: number };
  readonly settledQuestionKeys: readonly string[];
  readonly choices: PersonChoices;
}

/**
 * What of a board the next sorting must leave as it is. Ordinarily that is every stack with its frames and place, so
 * that nothing moves under people's hands; anew, only what people decided.
 */
export function sortingFacts(board: DecidedBoard, isAnew: boolean): SortFacts {
  const { frames, choices } = board;
  const byPerson = frames.filter(({ placedBy }) => placedBy === "person");
  const held = new Set(byPerson.map(({ stackId }) => stackId));
  const references = new Map(
    board.stacks.flatMap(({ id, referenceId }) =>
      referenceId !== null && choices.references.get(id) === referenceId ? [[id, referenceId] as const] : [],
    ),
  );
  const isTouched = (stack: DecidedStack) =>
    stack.isSettled ||
    stack.placedBy === "person" ||
    held.has(stack.id) ||
    references.has(stack.id) ||
    choices.takes.has(stack.id);
  const framesOf = framesByStack(frames);
  const kept = board.stacks.filter((stack) => !isAnew || isTouched(stack));
  const setAside = new Map(byPerson.map(({ id, setAside: reason }) => [id, reason]));
  // Whoever chose a frame as the reference wants it merged.
  for (const id of references.values()) if (!setAside.has(id)) setAside.set(id, null);
  return {
    stacks: kept.flatMap(({ isSettled, placedBy, referenceId: _, ...stack }): FixedStack[] => {
      const frameIds = framesOf.get(stack.id) ?? [];
      const referenceId = references.get(stack.id) ?? null;
      return frameIds.length > 0
        ? [{ ...stack, frameIds, byPerson: isSettled || placedBy === "person", referenceId }]
        : [];
    }),
    looseFrameIds: byPerson.filter(({ stackId }) => stackId === null).map(({ id }) => id),
    heldFrameIds: byPerson.filter(({ stackId }) => stackId !== null).map(({ id }) => id),
    setAside: Object.fromEntries(setAside),
    settledQuestionKeys: board.settledQuestionKeys,
    grid: isAnew ? addedLines(board) : board.grid,
  };
}

/** A sorting ends its grid at the last stack, so that what is empty beyond was added by people. */
function addedLines({ stacks, grid }: DecidedBoard): { rows: number; columns: number } {
  const rows = Math.max(0, ...stacks.map(({ row }) => row ?? 0));
  const columns = Math.max(0, ...stacks.map(({ column }) => column ?? 0));
  return { rows: grid.rows > rows ? grid.rows : 0, columns: grid.columns > columns ? grid.columns : 0 };
}

function framesByStack(frames: readonly DecidedFrame[]): Map<string, string[]> {
  const lists = new Map<string, string[]>();
  for (const { id, stackId } of [...frames].sort((a, b) => (a.orderTaken ?? 0) - (b.orderTaken ?? 0))) {
    if (stackId === null) continue;
    const list = lists.get(stackId);
    if (list) list.push(id);
    else lists.set(stackId, [id]);
  }
  return lists;
}

/**
 * Who merges a stack that a sorting made anew: whoever merged most of its frames before.
 * @returns by the id of the new stack; stacks that nobody had most of are left out
 */
export function inheritedShares<User extends string>(
  proposed: readonly { readonly id: string; readonly frameIds: readonly string[] }[],
  shareOfFrame: ReadonlyMap<string, User>,
): Map<string, User> {
  const shares = new Map<string, User>();
  for (const { id, frameIds } of proposed) {
    const counts = new Map<User, number>();
    for (const frameId of frameIds) {
      const user = shareOfFrame.get(frameId);
      if (user !== undefined) counts.set(user, (counts.get(user) ?? 0) + 1);
    }
    for (const [user, count] of counts) if (count * 2 > frameIds.length) shares.set(id, user);
  }
  return shares;
}
