/** A rectangle on the sheet, px from its top left corner. */
export interface Box {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

/** Half the width and the length of the arrow's head, px. */
const HEAD = { halfPx: 6, longPx: 9 };
/** Between the arrow's tip and the tile's edge, px. */
const TIP_GAP_PX = 5;
/** A curve flatter than this would run along the tiles' edges. */
const LEAST_BEND_PX = 36;

/**
 * The line from a frame on the bench to a tile above or below it: out of the frame's middle, into the middle of the
 * tile's nearer edge, upright at both ends.
 * @returns two SVG paths, in the boxes' px
 */
export function gesturePath(frame: Box, tile: Box): { readonly line: string; readonly head: string } {
  const isUp = tile.top + tile.height / 2 < frame.top + frame.height / 2;
  const away = isUp ? -1 : 1;
  const from = { x: frame.left + frame.width / 2, y: isUp ? frame.top : frame.top + frame.height };
  const to = {
    x: tile.left + tile.width / 2,
    y: isUp ? tile.top + tile.height + TIP_GAP_PX : tile.top - TIP_GAP_PX,
  };
  const bend = away * Math.max(LEAST_BEND_PX, Math.abs(to.y - from.y) * 0.6);
  const back = to.y - away * HEAD.longPx;
  return {
    line: `M ${at(from.x, from.y)} C ${at(from.x, from.y + bend)} ${at(to.x, to.y - bend)} ${at(to.x, to.y)}`,
    head: `M ${at(to.x - HEAD.halfPx, back)} L ${at(to.x, to.y)} L ${at(to.x + HEAD.halfPx, back)}`,
  };
}

function at(x: number, y: number): string {
  return `${Math.round(x)} ${Math.round(y)}`;
}
