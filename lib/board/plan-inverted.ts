import { applyChanges, ChangeConflict, type Change } from "@/lib/board/changes";
import { sharpestInUse } from "@/lib/board/look-up";
import type { Board, BoardStack } from "@/lib/board/model";
import { type BoardLookUp, hasOneChosen, isReferenceRight, lookUp, placeOf } from "@/lib/board/whole-board";

/**
 * What an undo does to the board of now, with what others did since taken into account: a stack that goes is recorded as
 * it is now, the grid goes on holding everybody's stacks, reference and chosen take are such as are there, and nothing
 * is asked about what is gone.
 * @param inverted - the changes that the step made, inverted
 * @param mayDivide - whether the person may say who merges what
 * @throws ChangeConflict where a later step is in the way
 */
export function planInverted(board: Board, inverted: readonly Change[], mayDivide: boolean): Change[] {
  const changes = withoutQuestionsOfGone(board, withPresentStacks(board, inverted));
  if (!mayDivide) requireDivisionKept(inverted, changes);
  const after = lookUp(applyChanges(board, changes));
  return [
    ...changes,
    ...closeQuestionsOfGone(after),
    ...growGrid(after.board),
    ...mendReferences(board, after),
    ...mendTakes(board, after),
  ];
}

/** Others may have moved or divided it since it was made: done again, it comes back as it went. */
function withPresentStacks(board: Board, changes: readonly Change[]): Change[] {
  const present = new Map(board.stacks.map((stack) => [stack.id, stack]));
  return changes.map((change) => {
    if (change.on === "stack") {
      const stack = present.get(change.id);
      if (stack) present.set(change.id, { ...stack, ...change.after });
    }
    return change.on === "no-stack" ? { ...change, stack: present.get(change.stack.id) ?? change.stack } : change;
  });
}

/** A stack that a lead has given to somebody since does not go by an editor's undo. */
function requireDivisionKept(inverted: readonly Change[], changes: readonly Change[]): void {
  const was = new Map(
    inverted.flatMap((change) => (change.on === "no-stack" ? [[change.stack.id, change.stack]] : [])),
  );
  for (const change of changes) {
    if (change.on !== "no-stack") continue;
    const { id, shareUserId } = change.stack;
    if (was.get(id)?.shareUserId !== shareUserId) throw new ChangeConflict("It has been given to somebody since.", id);
  }
}

/**
 * A question about a stack that is gone is not asked again: it would have gone with the stack. Where asking is all that
 * the undo does, it cannot be done.
 */
function withoutQuestionsOfGone(board: Board, changes: readonly Change[]): readonly Change[] {
  if (changes.every(({ on }) => on === "question")) return changes;
  const present = new Set(board.stacks.map(({ id }) => id));
  for (const change of changes) {
    if (change.on === "new-stack") present.add(change.stack.id);
    if (change.on === "no-stack") present.delete(change.stack.id);
  }
  return changes.filter(
    (change) => change.on !== "question" || !change.isOpen || change.question.stackIds.every((id) => present.has(id)),
  );
}

/** Those about a stack that the undo takes away; the next sorting may ask again. */
function closeQuestionsOfGone({ board, stacks }: BoardLookUp): Change[] {
  return board.questions
    .filter(({ stackIds }) => stackIds.some((id) => !stacks.has(id)))
    .map((question) => ({ on: "question", question, isOpen: false, isWithdrawn: true }));
}

function growGrid({ grid: { rows, columns }, stacks }: Board): Change[] {
  const after = {
    rows: stacks.reduce((most, { row }) => Math.max(most, row ?? 0), rows),
    columns: stacks.reduce((most, { column }) => Math.max(most, column ?? 0), columns),
  };
  return after.rows === rows && after.columns === columns ? [] : [{ on: "grid", before: { rows, columns }, after }];
}

function mendReferences(before: Board, { board, framesOf }: BoardLookUp): Change[] {
  const was = lookUp(before);
  return board.stacks.flatMap((stack): Change[] => {
    const { id, referenceId } = stack;
    const own = framesOf.get(id) ?? [];
    if (own.length === 0 || isReferenceRight(stack, own)) return [];
    const known = was.stacks.get(id);
    if (known && !isReferenceRight(known, was.framesOf.get(id) ?? [])) return [];
    return [{ on: "stack", id, before: { referenceId }, after: { referenceId: sharpestInUse(own) } }];
  });
}

/** What is chosen now stays chosen; where none is, the first take. */
function mendTakes(before: Board, { takesAt }: BoardLookUp): Change[] {
  const was = new Map(before.stacks.map((stack) => [stack.id, stack]));
  return [...takesAt.values()].flatMap((takes) => {
    if (hasOneChosen(takes)) return [];
    const inOrder = [...takes].sort((a, b) => a.take - b.take);
    const wasChosen = (stack: BoardStack) => {
      const known = was.get(stack.id);
      return known?.isChosenTake === true && placeOf(known) === placeOf(stack);
    };
    const chosen = inOrder.find(wasChosen) ?? inOrder.find(({ isChosenTake }) => isChosenTake) ?? inOrder[0];
    return inOrder
      .filter((stack) => stack.isChosenTake !== (stack === chosen))
      .map(({ id, isChosenTake }): Change => ({
        on: "stack",
        id,
        before: { isChosenTake },
        after: { isChosenTake: !isChosenTake },
      }));
  });
}
