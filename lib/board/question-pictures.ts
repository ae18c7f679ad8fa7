import type { BoardIndex } from "@/lib/board/board-index";
import { spotInFrame, type CropCentre } from "@/lib/board/layout";
import type { BoardFrame, BoardQuestion } from "@/lib/board/model";

export interface QuestionPicture {
  readonly frame: BoardFrame;
  /** The frame's name, or the tile whose reference it is. */
  readonly label: string;
  readonly centre: CropCentre;
}

/** More would not fit beside the question. */
const MOST_PICTURES = 3;

interface Placed {
  readonly frame: BoardFrame;
  readonly label: string;
  /** Top left corner on the joined picture, px; null: not registered. */
  readonly corner: { readonly x: number; readonly y: number } | null;
}

/**
 * The pictures that decide a question, at the same spot of the scene: the frames it is about and the references of
 * the tiles it names. The spot is that of the named tiles which most of the pictures show.
 */
export function questionPictures(index: BoardIndex, question: BoardQuestion): QuestionPicture[] {
  const placed = [...askedFrames(index, question), ...references(index, question)].slice(0, MOST_PICTURES);
  const spots = question.stackIds.flatMap((id) => sceneSpot(index, id));
  const counts = spots.map((spot) => placed.filter((picture) => centreAt(picture, spot).isSameSpot).length);
  const best = spots[counts.indexOf(Math.max(...counts))];
  return placed.map((picture) => ({
    frame: picture.frame,
    label: picture.label,
    centre: best ? centreAt(picture, best) : spotInFrame(picture.frame, { x: -1, y: -1 }),
  }));
}

function askedFrames(index: BoardIndex, question: BoardQuestion): Placed[] {
  return question.frameIds.slice(0, 2).flatMap((id) => {
    const frame = index.framesById.get(id);
    if (!frame) return [];
    const position = index.board.stacks.find((stack) => stack.id === frame.stackId)?.position;
    const corner =
      position && frame.shift ? { x: position.xPx + frame.shift.xPx, y: position.yPx + frame.shift.yPx } : null;
    return [{ frame, label: frame.name, corner }];
  });
}

function references(index: BoardIndex, question: BoardQuestion): Placed[] {
  return question.stackIds.slice(0, 2).flatMap((id) => {
    const tile = index.tileOfStack.get(id);
    const stack = tile?.takes.find((take) => take.id === id);
    const frame = index.framesById.get(stack?.referenceId ?? "");
    if (!tile || !stack || !frame || question.frameIds.includes(frame.id)) return [];
    const corner = stack.position ? { x: stack.position.xPx, y: stack.position.yPx } : null;
    return [{ frame, label: stack.take > 1 ? `${tile.name}, take ${stack.take}` : tile.name, corner }];
  });
}

function sceneSpot(index: BoardIndex, stackId: string): { x: number; y: number }[] {
  const stack = index.tileOfStack.get(stackId)?.takes.find((take) => take.id === stackId);
  const frame = index.framesById.get(stack?.referenceId ?? "");
  if (!stack?.position || !frame) return [];
  return [
    { x: stack.position.xPx + stack.spot.x * frame.widthPx, y: stack.position.yPx + stack.spot.y * frame.heightPx },
  ];
}

function centreAt({ frame, corner }: Placed, spot: { x: number; y: number }): CropCentre {
  const shift = corner ? { xPx: corner.x, yPx: corner.y } : { xPx: Infinity, yPx: Infinity };
  return spotInFrame({ ...frame, shift }, spot);
}
