import type { BoardQuestion } from "@/lib/board/model";

/** How far a person is on their walk through the open questions. Lives with the page: a new visit begins anew. */
export interface DocketWalk {
  /** Key of the question on the docket; null: the first of the walk. */
  readonly shown: string | null;
  /** Keys of those to be decided later, in the order they were put off. */
  readonly postponed: readonly string[];
  /** Keys answered here that were still open when the board was last seen. */
  readonly answered: readonly string[];
  /** Keys answered here and gone from the board. */
  readonly gone: readonly string[];
}

type Questions = readonly Pick<BoardQuestion, "key">[];

export const WALK_BEGIN: DocketWalk = { shown: null, postponed: [], answered: [], gone: [] };

/** The walk: the open questions as the board gives them (worst first), then those put off, in the order put off. */
export function walkOrder<Question extends { readonly key: string }>(
  questions: readonly Question[],
  walk: DocketWalk,
): Question[] {
  const byKey = new Map(questions.map((question) => [question.key, question]));
  return [
    ...questions.filter(({ key }) => !walk.postponed.includes(key)),
    ...walk.postponed.flatMap((key) => byKey.get(key) ?? []),
  ];
}

/** Index of the question on the docket within `walkOrder`; -1 where none is open. */
export function walkAt(questions: Questions, walk: DocketWalk): number {
  const order = walkOrder(questions, walk);
  const at = order.findIndex(({ key }) => key === walk.shown);
  return at < 0 && order.length > 0 ? 0 : at;
}

/** @param step - 1 the question after, -1 the one before; past the end it begins again */
export function turnWalk(questions: Questions, walk: DocketWalk, step: 1 | -1): DocketWalk {
  return { ...walk, shown: keyBeside(questions, walk, step) };
}

/** To this question, where it is open. */
export function turnWalkTo(walk: DocketWalk, key: string): DocketWalk {
  return walk.shown === key ? walk : { ...walk, shown: key };
}

/** The question on the docket goes to the end of the walk and stays open; the one after it is shown. */
export function postponeShown(questions: Questions, walk: DocketWalk): DocketWalk {
  const key = walkOrder(questions, walk)[walkAt(questions, walk)]?.key;
  if (key === undefined) return walk;
  const postponed = [...walk.postponed.filter((other) => other !== key), key];
  return { ...walk, shown: keyBeside(questions, walk, 1), postponed };
}

/** The question on the docket has been answered; the one after it is shown. */
export function answerShown(questions: Questions, walk: DocketWalk): DocketWalk {
  const key = walkOrder(questions, walk)[walkAt(questions, walk)]?.key;
  if (key === undefined) return walk;
  const next = keyBeside(questions, walk, 1);
  return {
    shown: next === key ? null : next,
    postponed: walk.postponed.filter((other) => other !== key),
    answered: [...walk.answered, key],
    gone: walk.gone.filter((other) => other !== key),
  };
}

/**
 * The walk on a newly seen board. A question whose answer was taken back, or refused, comes back onto the docket: its
 * reader wants to see what became of it.
 * @returns the same object where nothing changes
 */
export function seeBoard(questions: Questions, walk: DocketWalk): DocketWalk {
  const open = new Set(questions.map(({ key }) => key));
  const leaving = walk.answered.filter((key) => !open.has(key));
  const returning = walk.gone.filter((key) => open.has(key));
  if (leaving.length === 0 && returning.length === 0) return walk;
  return {
    ...walk,
    shown: returning.at(-1) ?? walk.shown,
    answered: walk.answered.filter((key) => open.has(key)),
    gone: [...walk.gone.filter((key) => !open.has(key)), ...leaving],
  };
}

function keyBeside(questions: Questions, walk: DocketWalk, step: 1 | -1): string | null {
  const order = walkOrder(questions, walk);
  return order[(walkAt(questions, walk) + step + order.length) % order.length]?.key ?? null;
}
