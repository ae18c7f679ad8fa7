import { isMeasuring } from "@/lib/board/comb";
import { expectedNoise } from "@/lib/board/expected-noise";
import { isSetAside, type BoardIndex, type BoardTile } from "@/lib/board/board-index";
import { countOf, exposureText, groupDigits, percent, trimmed } from "@/lib/board/words";
import type { BoardFrame } from "@/lib/board/model";

/** Exponent of display brightness: exposure values from a ratio of mean levels (analysis.md, method 8). */
const BRIGHTNESS_TO_EV = 2.2;

/** The status line under the board, most important first. */
export function boardStatus(index: BoardIndex): string[] {
  const { board, tiles, holes, loose, unplaced } = index;
  const setAside = board.frames.filter(isSetAside).length;
  const overlaps = index.seams.flatMap((seam) => (seam.overlap === null ? [] : [seam.overlap]));
  const settled = [...tiles.values()].filter(({ stack }) => stack.isSettled).length;
  return [
    `${groupDigits(tiles.size)} of ${countOf(tiles.size + holes.size, "tile")}`,
    ...(settled > 0 ? [`${groupDigits(settled)} settled`] : []),
    ...(unplaced.length > 0 ? [`${countOf(unplaced.length, "stack")} without a place`] : []),
    `${countOf(setAside, "frame")} set aside`,
    countOf(loose.length, "loose frame"),
    ...(overlaps.length > 0 ? [`smallest overlap ${percent(Math.min(...overlaps))}`] : []),
    ...fewestText(index),
  ];
}

/** What the bench's head says of a stack: settings, brightness, noise. */
export function stackFacts(tile: BoardTile, frames: readonly BoardFrame[]): string[] {
  const inUse = frames.filter((frame) => frame.setAside === null);
  const spread = brightnessSpread(inUse);
  return [
    `${inUse.length} of ${frames.length} in use`,
    ...settingsText(tile.reference ?? frames[0] ?? null),
    ...(spread === null ? [] : [`brightness varies ${spread.toFixed(2)} EV`]),
    ...(inUse.length === 0 ? [] : [`noise ${percent(expectedNoise(inUse.length, "mean"))} of one frame's`]),
  ];
}

/** "1/250 s f/8 ISO 100 105 mm", as far as it is written; one entry, or none. */
export function settingsText(frame: BoardFrame | null): string[] {
  if (!frame) return [];
  const { exposureSeconds, aperture, iso, focalLengthMm } = frame.metadata;
  const parts = [
    exposureSeconds === null ? null : exposureText(exposureSeconds),
    aperture === null ? null : `f/${trimmed(aperture)}`,
    iso === null ? null : `ISO ${iso}`,
    focalLengthMm === null ? null : `${trimmed(focalLengthMm)} mm`,
  ].filter((part) => part !== null);
  return parts.length === 0 ? [] : [parts.join(" ")];
}

/** From the darkest to the brightest frame, exposure values; null for fewer than two or a black frame. */
export function brightnessSpread(frames: readonly BoardFrame[]): number | null {
  const levels = frames.map((frame) => frame.meanBrightness);
  const darkest = Math.min(...levels);
  return levels.length < 2 || darkest <= 0 ? null : BRIGHTNESS_TO_EV * Math.log2(Math.max(...levels) / darkest);
}

/** The least overlap of a tile's measured seams, either side; null: none measured. */
export function leastOverlaps(index: BoardIndex): ReadonlyMap<string, number> {
  const least = new Map<string, number>();
  for (const { stackId, neighbourId, overlap } of index.seams) {
    if (overlap === null) continue;
    for (const id of [stackId, neighbourId]) {
      const name = index.tileOfStack.get(id)?.name;
      if (name !== undefined) least.set(name, Math.min(least.get(name) ?? 1, overlap));
    }
  }
  return least;
}

/** Said aloud for a tile: "A3, 7 of 7 frames in use, 1 question". */
export function tileLabel(tile: BoardTile): string {
  return [
    `Tile ${tile.name}`,
    `${tile.inUse} of ${countOf(tile.frames.length, "frame")} in use`,
    ...(tile.frames.some((frame) => isMeasuring(frame, tile.frames)) ? ["measuring"] : []),
    ...(tile.isFew ? ["few"] : []),
    ...(tile.takes.length > 1 ? [`${tile.takes.length} takes`] : []),
    ...(tile.stack.isSettled ? ["settled"] : []),
    ...(tile.questions.length > 0 ? [countOf(tile.questions.length, "question")] : []),
  ].join(", ");
}

/** "fewest frames 3 (C2), wanted 4 to 12"; nothing where every tile has enough. */
function fewestText({ board, tiles }: BoardIndex): string[] {
  const few = [...tiles.values()].filter((tile) => tile.isFew);
  const fewest = Math.min(...few.map((tile) => tile.inUse));
  const at = few.filter((tile) => tile.inUse === fewest).map((tile) => tile.name);
  if (at.length === 0) return [];
  const { least, most } = board.grid.framesPerTile;
  const where = at.length > 2 ? `${at[0]} and ${at.length - 1} more` : at.join(", ");
  return [`fewest frames ${fewest} (${where}), wanted ${least === most ? least : `${least} to ${most}`}`];
}
