"use client";

import { Crop } from "@/components/board/crop";
import type { BoardIndex } from "@/lib/board/board-index";
import type { BoardQuestion } from "@/lib/board/model";
import { questionPictures } from "@/lib/board/question-pictures";

interface QuestionPicturesProps {
  readonly index: BoardIndex;
  readonly question: BoardQuestion;
}

/** Three of them beside each other fit a phone. */
const CROP = { widthPx: 108, heightPx: 72 };

/** The pictures that decide a question, side by side at the same spot. */
export function QuestionPictures({ index, question }: QuestionPicturesProps) {
  const pictures = questionPictures(index, question);
  if (pictures.length === 0) return null;
  const isWhole = pictures.every(({ centre }) => centre === null);
  return (
    <ul aria-label={`Pictures that decide it, ${isWhole ? "whole" : "at 100 %"}`} className="flex gap-1.5">
      {pictures.map(({ frame, label, centre }) => (
        <li key={`${frame.id} ${label}`} className="figures text-[0.8125rem] leading-4">
          <span className="block bg-well" style={{ width: CROP.widthPx, height: CROP.heightPx }}>
            <Crop projectId={index.board.projectId} frame={frame} centre={centre} size={CROP} alt="" />
          </span>
          <span className="mt-0.5 block max-w-27 truncate">{label}</span>
        </li>
      ))}
    </ul>
  );
}
