import type { BoardIndex } from "@/lib/board/board-index";
import { spotByShift, type CropCentre } from "@/lib/board/layout";
import { isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { BoardFrame, BoardQuestion } from "@/lib/board/model";
import { tileName } from "@/lib/board/tile-name";

export interface QuestionPicture {
  readonly frame: BoardFrame;
  /** The frame's name, or the tile whose reference it is. */
  readonly label: string;
  /** Null: the whole frame, because the pictures of the question share no spot. */
  readonly centre: CropCentre | null;
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
 * The pictures that decide a question: the frames it is about and the references of the tiles that it names or that an
 * answer offers. At the same spot of the scene where all of them show one (that of a named tile, else the middle of
 * what two share), else whole.
 */
export function questionPictures(index: BoardIndex, question: BoardQuestion): QuestionPicture[] {
  const placed = [
    ...askedFrames(index, question),
    ...references(index, question),
    ...besideHole(index, question.tile ?? ""),
  ].slice(0, MOST_PICTURES);
  // Of what does not belong together the pictures are shown whole: crops of one spot would look alike.
  const spots = isMeasuredQuestion(question)
    ? []
    : [...question.stackIds.flatMap((id) => sceneSpot(index, id)), ...sharedSpots(placed)];
  const spot = spots.find((candidate) => placed.every((picture) => centreAt(picture, candidate).isSameSpot));
  return placed.map((picture) => ({
    frame: picture.frame,
    label: picture.label,
    centre: spot ? centreAt(picture, spot) : null,
  }));
}

/** The middle of what each two of the pictures both show: where a seam is judged. */
function sharedSpots(placed: readonly Placed[]): { x: number; y: number }[] {
  const boxes = placed.flatMap(({ frame, corner }) =>
    corner ? [{ ...corner, right: corner.x + frame.widthPx, bottom: corner.y + frame.heightPx }] : [],
  );
  return boxes.flatMap((box, at) =>
    boxes.slice(at + 1).flatMap((other) => {
      const left = Math.max(box.x, other.x);
      const top = Math.max(box.y, other.y);
      const right = Math.min(box.right, other.right);
      const bottom = Math.min(box.bottom, other.bottom);
      return left < right && top < bottom ? [{ x: (left + right) / 2, y: (top + bottom) / 2 }] : [];
    }),
  );
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
  const offered = question.answers.flatMap(({ action }) =>
    action.type === "move-frames" ? (action.toStackId ?? []) : [],
  );
  return [...new Set([...question.stackIds, ...offered])].slice(0, 2).flatMap((id) => {
    const tile = index.tileOfStack.get(id);
    const stack = tile?.takes.find((take) => take.id === id);
    const frame = index.framesById.get(stack?.referenceId ?? "");
    if (!tile || !stack || !frame || question.frameIds.includes(frame.id)) return [];
    const corner = stack.position ? { x: stack.position.xPx, y: stack.position.yPx } : null;
    return [{ frame, label: tile.takes.length > 1 ? `${tile.name}, take ${stack.take}` : tile.name, corner }];
  });
}

/** Of a hole, the references on both sides of it, whole: they show where its picture ought to go on. */
function besideHole(index: BoardIndex, name: string): Placed[] {
  const hole = index.holes.get(name);
  if (!hole) return [];
  const { row, column } = hole;
  const tilesAt = (places: readonly (readonly [number, number])[]) =>
    places.flatMap(([r, c]) => (r > 0 && c > 0 ? (index.tiles.get(tileName(r, c)) ?? []) : []));
  const besides = tilesAt([
    [row, column - 1],
    [row, column + 1],
  ]);
  const tiles =
    besides.length > 0
      ? besides
      : tilesAt([
          [row - 1, column],
          [row + 1, column],
        ]);
  return tiles.flatMap(({ name: label, reference }) => (reference ? [{ frame: reference, label, corner: null }] : []));
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
  return spotByShift({ ...frame, shift }, spot);
}
