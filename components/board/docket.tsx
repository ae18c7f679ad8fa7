"use client";

import { ArrowLeft, ArrowRight } from "lucide-react";
import Link from "next/link";
import { useRef, type KeyboardEvent } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { QuestionPictures } from "@/components/board/question-pictures";
import { LOOSE } from "@/components/board/use-board-place";
import type { Docket as DocketState } from "@/components/board/use-docket";
import { Button, LinkButton } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex } from "@/lib/board/board-index";
import { docketAnswers, type DocketAnswer } from "@/lib/board/docket-answers";
import type { BoardQuestion } from "@/lib/board/model";
import { countOf } from "@/lib/board/words";

interface DocketProps {
  readonly index: BoardIndex;
  readonly docket: DocketState;
  readonly chosen: string | null;
  readonly onShowTile: (name: string) => void;
}

/**
 * One open question at a time, worst first: the pictures that decide it, the question, the evidence, the answers.
 * The question takes the focus and turns with the arrow keys; after an answer it has the focus again, so that the
 * next one is heard and no key that is still held answers it.
 */
export function Docket({ index, docket, chosen, onShowTile }: DocketProps) {
  const { canEdit } = useBoardCommands();
  const group = useRef<HTMLDivElement>(null);
  const { question } = docket;
  const refocus = () => group.current?.focus();
  const onKeyDown = (event: KeyboardEvent) => {
    const step = event.key === "ArrowRight" ? 1 : event.key === "ArrowLeft" ? -1 : null;
    if (step === null || event.target !== event.currentTarget || docket.count < 2) return;
    event.preventDefault();
    docket.turn(step);
  };
  return (
    <section
      aria-label={countOf(docket.count, "open question")}
      className={classNames(
        "border-b border-l-6 border-b-hairline bg-paper px-4 py-2.5 max-sm:px-2.5",
        question ? "border-l-ochre" : "border-l-line",
      )}
    >
      <div
        ref={group}
        role="group"
        aria-label={question ? `Question ${docket.ordinal} of ${docket.count}` : "Questions"}
        aria-description={docket.count > 1 ? "Arrow keys left and right: the question before and after" : undefined}
        tabIndex={question ? 0 : -1}
        onKeyDown={onKeyDown}
        className="flex flex-wrap items-center gap-x-5 gap-y-2.5"
      >
        {question ? (
          <>
            <QuestionPictures index={index} question={question} />
            <div className="flex min-w-0 flex-1 basis-80 flex-wrap items-center gap-x-5 gap-y-2">
              <div className="min-w-0 flex-1 basis-72">
                <Counter docket={docket} onTurned={refocus} />
                <h2 className="text-base leading-6 font-bold">{question.message}</h2>
                <p className="max-w-[75ch] text-sm text-quiet">{question.evidence}</p>
              </div>
              <div className="flex flex-wrap items-center gap-2">
                {canEdit && (
                  <Answers
                    answers={docketAnswers(index.board, question)}
                    onAnswer={(answer) => docket.answer(answer) && refocus()}
                    onPostpone={() => {
                      docket.postpone();
                      refocus();
                    }}
                  />
                )}
                {canEdit && question.tile !== null && index.holes.has(question.tile) && (
                  <LinkButton tone="bare" size="slim" href={`/projects/${index.board.projectId}/intake`}>
                    Bring in frames of {question.tile}
                  </LinkButton>
                )}
                {docket.place !== null && docket.place !== chosen && (
                  <Button size="slim" tone="bare" onClick={() => docket.place !== null && onShowTile(docket.place)}>
                    Show {docket.place === LOOSE ? "loose frames" : docket.place}
                  </Button>
                )}
              </div>
              <p className="w-full text-[0.8125rem] leading-4 text-quiet">{untilAnswered(canEdit, question)}</p>
            </div>
          </>
        ) : (
          <NoQuestions projectId={index.board.projectId} />
        )}
      </div>
    </section>
  );
}

/** "question 1 of 3", and the way to the others. */
function Counter({ docket, onTurned }: { readonly docket: DocketState; readonly onTurned: () => void }) {
  const { ordinal, count, postponed } = docket;
  const turn = (step: 1 | -1) => {
    docket.turn(step);
    onTurned();
  };
  return (
    <p className="figures flex items-center gap-2 text-sm text-ochre">
      {count > 1 && (
        <Button size="slim" tone="bare" aria-label="Question before" className={TURN} onClick={() => turn(-1)}>
          <ArrowLeft aria-hidden size={16} />
        </Button>
      )}
      <span>
        question {ordinal} of {count}
        {postponed > 0 && `, ${postponed} put off`}
      </span>
      {count > 1 && (
        <Button size="slim" tone="bare" aria-label="Question after" className={TURN} onClick={() => turn(1)}>
          <ArrowRight aria-hidden size={16} />
        </Button>
      )}
    </p>
  );
}

const TURN = "!min-h-6 min-w-6 !p-0 pointer-coarse:!min-h-11";

interface AnswersProps {
  readonly answers: readonly DocketAnswer[];
  readonly onAnswer: (answer: DocketAnswer) => void;
  readonly onPostpone: () => void;
}

/** What a person can say, the recommended answer alone in petrol. */
function Answers({ answers, onAnswer, onPostpone }: AnswersProps) {
  return (
    <>
      {answers.map((answer) => (
        <Button
          key={answer.answer ?? "keep"}
          tone={answer.isRecommended ? "petrol" : "plain"}
          className="max-lg:min-h-11"
          onClick={() => onAnswer(answer)}
        >
          {answer.label}
        </Button>
      ))}
      <Button className="max-lg:min-h-11" onClick={onPostpone}>
        Decide later
      </Button>
    </>
  );
}

function untilAnswered(canEdit: boolean, question: BoardQuestion): string {
  const meanwhile = question.kind === "hole" ? "the place stays empty" : "what is on the board is handed over";
  return canEdit ? `Until it is answered, ${meanwhile}.` : `An editor or the lead answers it; until then ${meanwhile}.`;
}

/** Nothing is open: calm, and what to do next. */
function NoQuestions({ projectId }: { readonly projectId: string }) {
  return (
    <p className="flex flex-wrap items-center gap-x-4 text-sm">
      <span className="font-bold">No open questions</span>
      <span className="text-quiet">
        Look the board over, then{" "}
        <Link href={`/projects/${projectId}/handover`} className="link inline-block min-h-6 font-semibold text-ink">
          hand it over
        </Link>
        .
      </span>
    </p>
  );
}
