/** What of a step decides whether it stands: one row of the change record, without its steps. */
export interface RecordedStep {
  readonly id: string;
  readonly revision: number;
  /** Null: the computation, or an account that is gone. */
  readonly userId: string | null;
  readonly sentence: string;
  /** Id of the step that this one takes back. */
  readonly undoes: string | null;
  /** Everything after this revision is taken back by it; null: it is no such step. */
  readonly undoesAfter: number | null;
  /** It did nothing: there was nothing to do. */
  readonly isEmpty: boolean;
}

/** The undoing ones of a record, and whichever others are asked about. */
type Undoing = Pick<RecordedStep, "id" | "revision" | "undoes" | "undoesAfter">;

/**
 * Ids of the steps that have been taken back, by an undo or by going back to before them, and not done again since.
 * @param steps - in any order; all that undo something must be among them
 */
export function undoneSteps(steps: readonly Undoing[]): Set<string> {
  const undone = new Set<string>();
  const ranges: { readonly after: number; readonly before: number }[] = [];
  // From the newest: whether a step stands depends on later ones alone.
  for (const step of [...steps].sort((a, b) => b.revision - a.revision)) {
    if (ranges.some(({ after, before }) => step.revision > after && step.revision < before)) undone.add(step.id);
    if (undone.has(step.id)) continue;
    if (step.undoes !== null) undone.add(step.undoes);
    if (step.undoesAfter !== null) ranges.push({ after: step.undoesAfter, before: step.revision });
  }
  return undone;
}

export interface LaterStep {
  readonly id: string;
  readonly type: string;
  readonly isUndone: boolean;
  readonly undoes: string | null;
  readonly undoesAfter: number | null;
}

/**
 * Of the steps after a revision those that going back to it truly undoes: without what is undone already, without the
 * undos that did so, and without asking for a sorting, which by itself changes nothing.
 * @param later - all recorded after the revision
 */
export function standingAfter<Step extends LaterStep>(revision: number, later: readonly Step[]): Step[] {
  const laterIds = new Set(later.map(({ id }) => id));
  return later.filter(({ type, isUndone, undoes, undoesAfter }) => {
    if (isUndone || type === "sort-anew") return false;
    if (undoes !== null) return !laterIds.has(undoes);
    return undoesAfter === null || undoesAfter < revision;
  });
}

export interface UndoStacks {
  /** What undo takes back, one after another: the newest first. */
  readonly undo: readonly RecordedStep[];
  /** Own undos that redo takes back, the newest first; none once something else has been done. */
  readonly redo: readonly RecordedStep[];
}

/**
 * What a person can undo and redo, from the record. An undo of an undo does the step again, so it counts as a step;
 * an undo of that takes it back again, and so on.
 * @param steps - all of the person's, and everybody's that undo something
 */
export function undoStacksOf(userId: string, steps: readonly RecordedStep[]): UndoStacks {
  const byId = new Map(steps.map((step) => [step.id, step]));
  const undone = undoneSteps(steps);
  const undoneDirectly = new Set(steps.flatMap(({ undoes }) => (undoes === null ? [] : [undoes])));
  const own = steps.filter((step) => step.userId === userId).sort((a, b) => b.revision - a.revision);
  const newestAct = own.find(({ undoes, isEmpty }) => undoes === null && !isEmpty)?.revision ?? 0;
  const open = own.filter(({ id, isEmpty }) => !isEmpty && !undone.has(id) && !undoneDirectly.has(id));
  return {
    undo: open.filter((step) => !takesBack(step, byId)),
    redo: open.filter((step) => takesBack(step, byId) && step.revision > newestAct),
  };
}

/** An odd number of undos on top of a step takes it back, an even number does it again. */
function takesBack(step: RecordedStep, byId: ReadonlyMap<string, RecordedStep>): boolean {
  let isBack = false;
  for (let at: RecordedStep | undefined = step; at?.undoes; at = byId.get(at.undoes)) isBack = !isBack;
  return isBack;
}
