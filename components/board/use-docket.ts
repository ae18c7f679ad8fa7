"use client";

import { useEffect, useRef, useState } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { LOOSE } from "@/components/board/use-board-place";
import { answerDone } from "@/lib/board/answer-words";
import type { BoardIndex } from "@/lib/board/board-index";
import { settleDraft, type DocketAnswer } from "@/lib/board/docket-answers";
import {
  answerShown,
  postponeShown,
  seeBoard,
  turnWalk,
  turnWalkTo,
  walkAt,
  walkOrder,
  WALK_BEGIN,
  type DocketWalk,
} from "@/lib/board/docket-walk";
import type { Board, BoardQuestion } from "@/lib/board/model";
import { describeSettling } from "@/lib/board/sentence";
import { countOf } from "@/lib/board/words";
import { newId } from "@/lib/ids";

export interface Docket {
  /** Null: none is open. */
  readonly question: BoardQuestion | null;
  /** Its place in the walk, from 1. */
  readonly ordinal: number;
  readonly count: number;
  /** How many of them were put off. */
  readonly postponed: number;
  /** The tile, or the loose frames, that the question is about; null: a place without a stack. */
  readonly place: string | null;
  /** What the last answer here did, while an undo would take it back: "B5 left empty"; null: none. */
  readonly done: string | null;
  /** @returns whether the docket went on to the next question */
  readonly answer: (answer: DocketAnswer) => boolean;
  readonly postpone: () => void;
  readonly turn: (step: 1 | -1) => void;
}

interface DocketInput {
  readonly index: BoardIndex;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
}

/**
 * Which question the docket shows, and what becomes of it. It turns to the chosen tile's first one, stays where a
 * person turned it, and opens on the board what it turned to: once, so that what a person closes stays closed.
 */
export function useDocket({ index, chosen, onChoose }: DocketInput): Docket {
  const { run, announce, undoable } = useBoardCommands();
  const [given, setGiven] = useState<GivenAnswer | null>(null);
  const { questions } = index.board;
  const [state, setState] = useState<{ walk: DocketWalk; chosen: string | null }>({ walk: WALK_BEGIN, chosen: null });
  const walk = followChosen(index, seeBoard(questions, state.walk), chosen === state.chosen ? null : chosen);
  // While drawing, so that no frame shows the question before (react.dev, "Adjusting some state when a prop changes").
  if (walk !== state.walk || chosen !== state.chosen) setState({ walk, chosen });

  const order = walkOrder(questions, walk);
  const at = walkAt(questions, walk);
  const question = order[at] ?? null;

  // Said once the next question stands there: an answer may have settled that one too.
  const done = useRef<string | null>(null);
  const latest = useRef({ announce, question, count: order.length });
  useEffect(() => {
    latest.current = { announce, question, count: order.length };
  });
  const key = question?.key ?? null;
  useEffect(() => {
    if (done.current === null) return;
    const { announce: say, question: shown, count } = latest.current;
    say(
      `${done.current} ${shown ? `${countOf(count, "question")} open. ${shown.message} ${shown.evidence}` : "No open questions."}`.trim(),
    );
    done.current = null;
  }, [key]);

  const goTo = (next: DocketWalk, said: string) => {
    done.current = said;
    const shown = questions.find((candidate) => candidate.key === next.shown) ?? null;
    const place = shown && questionPlace(index, shown);
    setState({ walk: next, chosen });
    if (shown && place !== chosen) onChoose(place);
  };

  return {
    question,
    ordinal: at + 1,
    count: order.length,
    postponed: order.filter(({ key }) => walk.postponed.includes(key)).length,
    place: question && questionPlace(index, question),
    done: given !== null && given.sentence === undoable ? given.done : null,
    answer: ({ label, answer }) => {
      if (!question || !run(settleDraft(question, answer, newId))) return false;
      setGiven(giveAnswer(index.board, question, answer));
      goTo(answerShown(questions, walk), `${label}: answered.`);
      return true;
    },
    postpone: () => {
      if (order.length === 1) return announce("It stays open, and is the only one.");
      goTo(postponeShown(questions, walk), "Put off.");
    },
    turn: (step) => goTo(turnWalk(questions, walk, step), ""),
  };
}

interface GivenAnswer {
  readonly done: string;
  /** As the record tells it. */
  readonly sentence: string;
}

function giveAnswer(board: Board, question: BoardQuestion, answer: number | null): GivenAnswer {
  const target = { kind: "question", questionId: question.id, answer } as const;
  return { done: answerDone(board, question, answer), sentence: describeSettling({ target }, board) };
}

/** To the first question of a newly chosen tile, unless the docket shows one of it already. */
function followChosen(index: BoardIndex, walk: DocketWalk, chosen: string | null): DocketWalk {
  if (chosen === null) return walk;
  const order = walkOrder(index.board.questions, walk);
  const isThere = (question: BoardQuestion | undefined) => question && questionPlace(index, question) === chosen;
  if (isThere(order[walkAt(index.board.questions, walk)])) return walk;
  const first = order.find(isThere);
  return first ? turnWalkTo(walk, first.key) : walk;
}

/** What of the board opens for a question: its tile, else the first that it names, else the loose frames; null: none. */
export function questionPlace(index: BoardIndex, { tile, stackIds, frameIds }: BoardQuestion): string | null {
  if (tile !== null) return index.tiles.has(tile) ? tile : null;
  const named = stackIds.flatMap((id) => index.tileOfStack.get(id)?.name ?? [])[0];
  if (named !== undefined) return named;
  const holder = index.framesById.get(frameIds[0] ?? "")?.stackId;
  return holder === null ? LOOSE : (index.tileOfStack.get(holder ?? "")?.name ?? null);
}
