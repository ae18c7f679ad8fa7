"use client";

import { Crop } from "@/components/board/crop";
import { LOOSE } from "@/components/board/use-board-place";
import { Button, LinkButton } from "@/components/ui/button";
import type { BoardIndex } from "@/lib/board/board-index";
import type { BoardQuestion } from "@/lib/board/model";
import { questionPictures, type QuestionPicture } from "@/lib/board/question-pictures";
import { countOf } from "@/lib/board/words";

interface DocketProps {
  readonly index: BoardIndex;
  readonly question: BoardQuestion;
  readonly at: number;
  readonly onTurn: (at: number) => void;
  readonly onShowTile: (name: string) => void;
}

/** One open question at a time, worst first: the pictures that decide it, the question, the evidence. */
export function Docket({ index, question, at, onTurn, onShowTile }: DocketProps) {
  const count = index.board.questions.length;
  return (
    <section
      aria-label={countOf(count, "question")}
      className="flex flex-wrap items-center gap-x-6 gap-y-3 border-b border-l-6 border-b-hairline border-l-ochre bg-paper px-4 py-2.5"
    >
      <QuestionPictures projectId={index.board.projectId} pictures={questionPictures(index, question)} />
      <div className="min-w-64 flex-1" aria-live="polite">
        <p className="figures text-sm text-ochre">
          question {at + 1} of {count}
        </p>
        <h2 className="text-base leading-6 font-bold">{question.message}</h2>
        <p className="max-w-[75ch] text-sm text-quiet">{question.evidence}</p>
      </div>
      <div className="flex flex-wrap gap-2">
        {placesOf(index, question).map((place) => (
          <Button key={place} size="slim" onClick={() => onShowTile(place)}>
            Show {place === LOOSE ? "loose frames" : place}
          </Button>
        ))}
        {question.tile !== null && index.holes.has(question.tile) && (
          <LinkButton size="slim" href={`/projects/${index.board.projectId}/intake`}>
            Bring in frames of {question.tile}
          </LinkButton>
        )}
        {count > 1 && (
          <>
            <Button size="slim" tone="bare" onClick={() => onTurn((at + count - 1) % count)}>
              Question before
            </Button>
            <Button size="slim" tone="bare" onClick={() => onTurn((at + 1) % count)}>
              Question after
            </Button>
          </>
        )}
      </div>
    </section>
  );
}

/** What can be opened on the board for a question: the tiles it names, at most two, or the loose frames. */
function placesOf(index: BoardIndex, { tile, stackIds, frameIds }: BoardQuestion): string[] {
  if (tile !== null && index.tiles.has(tile)) return [tile];
  const names = new Set(stackIds.flatMap((id) => index.tileOfStack.get(id)?.name ?? []));
  if (names.size > 0) return [...names].slice(0, 2);
  return index.loose.some(({ id }) => frameIds.includes(id)) ? [LOOSE] : [];
}

const CROP = { widthPx: 104, heightPx: 66 };

function QuestionPictures({ projectId, pictures }: { projectId: string; pictures: readonly QuestionPicture[] }) {
  if (pictures.length === 0) return null;
  const isWhole = pictures.every(({ centre }) => centre === null);
  return (
    <ul aria-label={`Pictures that decide it, ${isWhole ? "whole" : "at 100 %"}`} className="flex gap-1.5">
      {pictures.map(({ frame, label, centre }) => (
        <li key={frame.id} className="figures text-[0.8125rem] leading-4">
          <span className="block bg-well" style={{ width: CROP.widthPx, height: CROP.heightPx }}>
            <Crop projectId={projectId} frame={frame} centre={centre} size={CROP} alt="" />
          </span>
          <span className="mt-0.5 block max-w-26 truncate">{label}</span>
        </li>
      ))}
    </ul>
  );
}
