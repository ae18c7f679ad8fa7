"use client";

import { Picture } from "@/components/board/picture";
import { Button } from "@/components/ui/button";
import type { BoardIndex } from "@/lib/board/board-index";
import type { BoardQuestion } from "@/lib/board/model";
import { questionPictures, type QuestionPicture } from "@/lib/board/question-pictures";
import { countOf } from "@/lib/board/words";
import { cropUrl } from "@/lib/frames/picture-urls";

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
  const { tile } = question;
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
        {tile !== null && index.tiles.has(tile) && (
          <Button size="slim" onClick={() => onShowTile(tile)}>
            Show {tile}
          </Button>
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

const CROP = { cropWidthPx: 104, cropHeightPx: 66 };

function QuestionPictures({ projectId, pictures }: { projectId: string; pictures: readonly QuestionPicture[] }) {
  if (pictures.length === 0) return null;
  return (
    <ul aria-label="Pictures that decide it, at 100 %" className="flex gap-1.5">
      {pictures.map(({ frame, label, centre }) => (
        <li key={frame.id} className="figures text-[0.8125rem] leading-4">
          <span className="block bg-well" style={{ width: CROP.cropWidthPx, height: CROP.cropHeightPx }}>
            <Picture
              src={cropUrl(projectId, frame.id, {
                widthPx: frame.widthPx,
                heightPx: frame.heightPx,
                centreXPx: centre.centreXPx,
                centreYPx: centre.centreYPx,
                ...CROP,
              })}
              alt=""
              widthPx={CROP.cropWidthPx}
              heightPx={CROP.cropHeightPx}
              className="object-none"
            />
          </span>
          <span className="mt-0.5 block max-w-26 truncate">{label}</span>
          {!centre.isSameSpot && <span className="block text-quiet">another spot</span>}
        </li>
      ))}
    </ul>
  );
}
