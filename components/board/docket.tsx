"use client";

import { ArrowLeft, ArrowRight } from "lucide-react";
import Link from "next/link";
import { useRef, type KeyboardEvent, type ReactNode } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { QuestionPictures } from "@/components/board/question-pictures";
import { LOOSE } from "@/components/board/use-board-place";
import type { Docket as DocketState } from "@/components/board/use-docket";
import { useRest } from "@/components/board/use-rest";
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
  const { isResting, isRestingNow, rest } = useRest();
  // The second press of a double-click, or a key still held, was meant for the question before.
  const press = (act: () => boolean) => {
    if (isRestingNow() || !act()) return;
    rest();
    refocus();
  };
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
        "@container border-b border-l-6 border-b-hairline bg-paper px-4 py-2.5 max-sm:px-2.5",
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
        // Room for two lines of each: the answers stand where they stood, and the board below does not jump.
        className="flex flex-wrap items-start gap-x-5 gap-y-2.5"
      >
        {question ? (
          <>
            <QuestionPictures index={index} question={question} />
            <div className="min-h-32 min-w-0 flex-1 basis-72 @min-[62rem]:min-h-28">
              <Counter docket={docket} onTurned={refocus}>
                <Ways {...{ index, docket, chosen, onShowTile }} />
              </Counter>
              <h2 className="text-base leading-6 font-bold">{question.message}</h2>
              <p className="max-w-[75ch] text-sm leading-5 text-quiet">
                {question.evidence} <span>{untilAnswered(canEdit, question)}</span>
              </p>
            </div>
            {canEdit && (
              <div className="w-full min-h-18 @min-[62rem]:min-h-28 @min-[62rem]:w-86">
                <Answers
                  answers={docketAnswers(index.board, question)}
                  isResting={isResting}
                  onAnswer={(answer) => press(() => docket.answer(answer))}
                  onPostpone={() =>
                    press(() => {
                      docket.postpone();
                      return true;
                    })
                  }
                />
                <Done done={docket.done} onUndone={refocus} />
              </div>
            )}
          </>
        ) : (
          <div className={classNames("w-full", docket.done !== null && "min-h-28")}>
            <NoQuestions projectId={index.board.projectId} />
            <Done done={docket.done} onUndone={refocus} />
          </div>
        )}
      </div>
    </section>
  );
}

/** The last answer given here, and the way back from it. */
function Done({ done, onUndone }: { readonly done: string | null; readonly onUndone: () => void }) {
  const { undo } = useBoardCommands();
  if (done === null) return null;
  return (
    <p className="mt-1 flex flex-wrap items-center gap-x-2 text-sm">
      <span>{done}.</span>
      <Button
        size="slim"
        tone="bare"
        className="!min-h-6 !px-1 underline pointer-coarse:!min-h-11"
        onClick={() => {
          undo();
          onUndone();
        }}
      >
        Undo
      </Button>
    </p>
  );
}

/** What else helps with the question: its frames brought in, its place shown. */
function Ways({ index, docket, chosen, onShowTile }: DocketProps) {
  const { canEdit } = useBoardCommands();
  const { question, place } = docket;
  return (
    <span className="ml-auto flex flex-wrap">
      {canEdit && question && question.tile !== null && index.holes.has(question.tile) && (
        <LinkButton tone="bare" size="slim" className={WAY} href={`/projects/${index.board.projectId}/intake`}>
          Bring in frames of {question.tile}
        </LinkButton>
      )}
      {place !== null && place !== chosen && (
        <Button size="slim" tone="bare" className={WAY} onClick={() => onShowTile(place)}>
          Show {place === LOOSE ? "loose frames" : place}
        </Button>
      )}
    </span>
  );
}

const WAY = "!min-h-6 !py-0 pointer-coarse:!min-h-11";

interface CounterProps {
  readonly docket: DocketState;
  readonly onTurned: () => void;
  readonly children: ReactNode;
}

/** "question 1 of 3", and the way to the others. */
function Counter({ docket, onTurned, children }: CounterProps) {
  const { ordinal, count, postponed } = docket;
  const turn = (step: 1 | -1) => {
    docket.turn(step);
    onTurned();
  };
  return (
    <div className="flex min-h-6 flex-wrap items-center gap-2 text-sm">
      {count > 1 && (
        <Button size="slim" tone="bare" aria-label="Question before" className={TURN} onClick={() => turn(-1)}>
          <ArrowLeft aria-hidden size={16} />
        </Button>
      )}
      <span className="figures text-ochre">
        question {ordinal} of {count}
        {postponed > 0 && `, ${postponed} put off`}
      </span>
      {count > 1 && (
        <Button size="slim" tone="bare" aria-label="Question after" className={TURN} onClick={() => turn(1)}>
          <ArrowRight aria-hidden size={16} />
        </Button>
      )}
      {children}
    </div>
  );
}

const TURN = "!min-h-6 min-w-6 !p-0 pointer-coarse:!min-h-11";

interface AnswersProps {
  readonly answers: readonly DocketAnswer[];
  readonly isResting: boolean;
  readonly onAnswer: (answer: DocketAnswer) => void;
  readonly onPostpone: () => void;
}

/** What a person can say; petrol alone what the measurements speak for. */
function Answers({ answers, isResting, onAnswer, onPostpone }: AnswersProps) {
  // They stay in the tab order meanwhile: what has the focus keeps it.
  const shared = { className: "max-lg:min-h-11", "aria-disabled": isResting || undefined };
  return (
    <div className="flex flex-wrap items-center gap-2">
      {answers.map((answer) => (
        <Button
          key={answer.answer ?? "keep"}
          tone={answer.isRecommended ? "petrol" : "plain"}
          onClick={() => onAnswer(answer)}
          {...shared}
        >
          {answer.label}
        </Button>
      ))}
      <Button onClick={onPostpone} {...shared}>
        Decide later
      </Button>
    </div>
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
