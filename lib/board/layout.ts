import { median, type BoardIndex, type BoardTile } from "@/lib/board/board-index";
import type { BoardFrame } from "@/lib/board/model";
import { LEAST_SHIFT_BETWEEN } from "@/lib/sorting/judge-pair";

/** full: caption with comb; medium: name and exceptions; map: a mosaic. */
export type TileSize = "full" | "medium" | "map";

export interface BoardLayout {
  readonly size: TileSize;
  /** Width of the picture of one tile, px. */
  readonly tileWidthPx: number;
  readonly pictureHeightPx: number;
  readonly captionHeightPx: number;
  readonly gapPx: number;
  /** Width of the column of row letters. */
  readonly lettersWidthPx: number;
}

/** Narrowest tile that holds name, eight bars and "8/8": measured with the shipped typeface. */
const FULL_TILE_PX = 118;
/** Narrowest tile that holds its name and a question mark. */
const MEDIUM_TILE_PX = 58;
/** Smallest tile of the map, so that 50 columns fit a laptop's screen; rail and table offer larger targets for the same. */
const MAP_TILE_PX = 20;
/** A wider tile would show the preview larger than a person needs to find their way. */
const LARGEST_TILE_PX = 420;
/** A grid of few columns keeps two rows in view, so that a tile and its bench, or its neighbour below, are seen together. */
const ROWS_IN_VIEW = 2;
/** However low the window: tiles of few columns are not made smaller than this for it. */
const LEAST_FOR_HEIGHT_PX = 240;

/**
 * Size of the tiles for a width.
 * @param columns - 1 or more
 * @param widthPx - what the well offers inside its padding
 * @param heightPx - what it offers below the numbers
 * @param aspect - width over height of the part of a picture that a tile shows
 */
export function layoutBoard(input: {
  columns: number;
  widthPx: number;
  heightPx: number;
  aspect: number;
}): BoardLayout {
  const columns = Math.max(1, input.columns);
  const lettersWidthPx = 64;
  const perTile = (gapPx: number) => Math.floor((input.widthPx - lettersWidthPx - gapPx * (columns - 1)) / columns);
  const wide = perTile(3);
  const size: TileSize = wide >= FULL_TILE_PX ? "full" : wide >= MEDIUM_TILE_PX ? "medium" : "map";
  const gapPx = size === "full" ? 3 : size === "medium" ? 2 : 1;
  const captionHeightPx = size === "full" ? 28 : size === "medium" ? 24 : 0;
  const lowPx = Math.floor((input.heightPx / ROWS_IN_VIEW - captionHeightPx - gapPx) * input.aspect);
  const largestPx = Math.min(LARGEST_TILE_PX, Math.max(LEAST_FOR_HEIGHT_PX, lowPx));
  const tileWidthPx = Math.min(largestPx, Math.max(MAP_TILE_PX, perTile(gapPx)));
  return {
    size,
    tileWidthPx,
    pictureHeightPx: Math.max(1, Math.round(tileWidthPx / input.aspect)),
    captionHeightPx,
    gapPx,
    lettersWidthPx,
  };
}

/** Whether the nth row or column carries its label: where there is no room for all, every second, third ... does. */
export function isLabelled(nth: number, labelPx: number, pitchPx: number): boolean {
  const step = Math.max(1, Math.ceil(labelPx / pitchPx));
  return nth === 1 || nth % step === 0;
}

/** The part of a picture that a tile shows, fractions of its sides. */
export interface PicturePart {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

const WHOLE: PicturePart = { x: 0, y: 0, width: 1, height: 1 };

/** Steps between neighbouring tiles, full-size px, and the size of a frame. */
export interface TileSteps {
  readonly acrossPx: number;
  readonly downPx: number;
  readonly widthPx: number;
  readonly heightPx: number;
}

/**
 * Typical steps from tile to tile, so that every tile can show its own part and the neighbours' pictures meet.
 * Without measured positions, or where pictures do not overlap, a step is the whole side.
 */
export function tileSteps(index: BoardIndex): TileSteps {
  const references = [...index.tiles.values()].flatMap((tile) => (tile.reference ? [tile.reference] : []));
  const widthPx = median(references.map((frame) => frame.widthPx)) ?? 3;
  const heightPx = median(references.map((frame) => frame.heightPx)) ?? 2;
  const step = (side: "right" | "below") =>
    median(
      index.seams.flatMap((seam) => {
        const from = index.tileOfStack.get(seam.stackId)?.stack.position;
        const to = index.tileOfStack.get(seam.neighbourId)?.stack.position;
        if (seam.side !== side || !from || !to) return [];
        return [side === "right" ? to.xPx - from.xPx : to.yPx - from.yPx];
      }),
    );
  return { acrossPx: within(step("right"), widthPx), downPx: within(step("below"), heightPx), widthPx, heightPx };
}

/**
 * The part that a tile shows: as large as one step, around the middle of the tile's place in a regular grid,
 * so that a tile which lies a little off still continues its neighbours.
 */
export function picturePart(tile: BoardTile, steps: TileSteps, origin: { xPx: number; yPx: number }): PicturePart {
  const width = steps.acrossPx / steps.widthPx;
  const height = steps.downPx / steps.heightPx;
  const { position } = tile.stack;
  const offset =
    position && tile.row !== null && tile.column !== null
      ? {
          x: (origin.xPx + (tile.column - 1) * steps.acrossPx - position.xPx) / steps.widthPx,
          y: (origin.yPx + (tile.row - 1) * steps.downPx - position.yPx) / steps.heightPx,
        }
      : { x: 0, y: 0 };
  if (width >= 1 && height >= 1) return WHOLE;
  return {
    x: clamp((1 - width) / 2 + offset.x, 0, 1 - width),
    y: clamp((1 - height) / 2 + offset.y, 0, 1 - height),
    width,
    height,
  };
}

/** Where A1 would lie for the regular grid to fit the measured positions best (median of what each tile says). */
export function gridOrigin(index: BoardIndex, steps: TileSteps): { xPx: number; yPx: number } {
  const placed = [...index.tiles.values()].flatMap(({ row, column, stack }) =>
    row !== null && column !== null && stack.position ? [{ row, column, position: stack.position }] : [],
  );
  return {
    xPx: median(placed.map(({ column, position }) => position.xPx - (column - 1) * steps.acrossPx)) ?? 0,
    yPx: median(placed.map(({ row, position }) => position.yPx - (row - 1) * steps.downPx)) ?? 0,
  };
}

export interface CropCentre {
  readonly centreXPx: number;
  readonly centreYPx: number;
  /** False: the frame does not show that spot; its own middle is shown instead. */
  readonly isSameSpot: boolean;
}

type Shifted = Pick<BoardFrame, "widthPx" | "heightPx" | "shift">;

/** Whether a frame lies further from its reference than frames of one tile do: it shows another part of the scene. */
export function isFarShifted({ widthPx, heightPx, shift }: Shifted): boolean {
  return shift !== null && Math.hypot(shift.xPx, shift.yPx) > LEAST_SHIFT_BETWEEN * Math.max(widthPx, heightPx);
}

/**
 * Where a frame shows a spot of its reference, so that crops of a stack can be laid side by side. One that shows
 * another part of the scene is cropped at the same place of the frame instead: followed, it would look like the others.
 * @param spotPx - the spot, reference's full-size px
 * @returns the spot in the frame's own upright full-size px
 */
export function spotInFrame(frame: Shifted, spotPx: { readonly x: number; readonly y: number }): CropCentre {
  if (!isFarShifted(frame)) return spotByShift(frame, spotPx);
  return { ...spotByShift({ ...frame, shift: null }, spotPx), isSameSpot: false };
}

/** The same, whatever the shift. */
export function spotByShift(frame: Shifted, spotPx: { readonly x: number; readonly y: number }): CropCentre {
  const x = spotPx.x - (frame.shift?.xPx ?? 0);
  const y = spotPx.y - (frame.shift?.yPx ?? 0);
  const isSameSpot = x >= 0 && y >= 0 && x <= frame.widthPx && y <= frame.heightPx;
  if (isSameSpot) return { centreXPx: x, centreYPx: y, isSameSpot };
  return { centreXPx: frame.widthPx / 2, centreYPx: frame.heightPx / 2, isSameSpot };
}

/**
 * The spot nearest to a wished one that leaves what is seen around it inside every frame that shows it: crops that
 * were pushed in at one frame's edge would no longer lie at the same spot.
 * @param spotPx - the spot, reference's full-size px
 * @param seen - size of what is seen around it, full-size px
 * @param frames - the reference first; a frame that has no such spot is passed over
 */
export function spotInView(
  spotPx: { readonly x: number; readonly y: number },
  seen: { readonly widthPx: number; readonly heightPx: number },
  frames: readonly Shifted[],
): { x: number; y: number } {
  const near = frames.map((frame) => (isFarShifted(frame) ? { ...frame, shift: null } : frame));
  const across = near.map((frame) => ({ from: frame.shift?.xPx ?? 0, side: frame.widthPx }));
  const down = near.map((frame) => ({ from: frame.shift?.yPx ?? 0, side: frame.heightPx }));
  return { x: inside(spotPx.x, seen.widthPx, across), y: inside(spotPx.y, seen.heightPx, down) };
}

function inside(wished: number, seen: number, spans: readonly { readonly from: number; readonly side: number }[]) {
  let least = -Infinity;
  let most = Infinity;
  for (const { from, side } of spans) {
    const half = Math.min(seen, side) / 2;
    if (from + half > most || from + side - half < least) continue;
    least = Math.max(least, from + half);
    most = Math.min(most, from + side - half);
  }
  return clamp(wished, least, most);
}

const BENCH_GAP_PX = 12;
/** Narrowest and widest crop on the bench. */
const CROP_LEAST_PX = 130;
const CROP_MOST_PX = 232;
/** In two rows and more, crops grow until they fill the width: no strip beside them stays empty. */
const CROP_MOST_WRAPPED_PX = 280;

/** How the frames of a bench wrap: as few rows as fit, filled evenly (12 frames are two rows of 6), never sideways. */
export function benchCrops(count: number, widthPx: number): { perRow: number; widthPx: number; heightPx: number } {
  const fitting = Math.max(1, Math.floor((widthPx + BENCH_GAP_PX) / (CROP_LEAST_PX + BENCH_GAP_PX)));
  const rows = Math.max(1, Math.ceil(count / fitting));
  const perRow = Math.max(1, Math.ceil(count / rows));
  const width = Math.floor((widthPx - BENCH_GAP_PX * (perRow - 1)) / perRow);
  const mostPx = rows > 1 ? CROP_MOST_WRAPPED_PX : CROP_MOST_PX;
  const cropWidthPx = Math.max(Math.min(CROP_LEAST_PX, widthPx), Math.min(mostPx, width));
  return { perRow, widthPx: cropWidthPx, heightPx: Math.round((cropWidthPx * 2) / 3) };
}

function within(step: number | null, sidePx: number): number {
  return step === null || step <= 0 || step > sidePx ? sidePx : step;
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(Math.max(value, low), Math.max(low, high));
}
