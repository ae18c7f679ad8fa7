import type { Label } from "./lattice";
import type { ShotOrder } from "./types";

/** A rectangle of labels, ends included. */
export interface Box {
  readonly top: number;
  readonly left: number;
  readonly bottom: number;
  readonly right: number;
}

const ALONG = ["rows", "columns"] as const;
const CORNERS = ["top-left", "top-right", "bottom-left", "bottom-right"] as const;

/** The 16 usual ways to walk a grid, the plainest first. */
export const WALKS: readonly ShotOrder[] = ALONG.flatMap((along) =>
  [false, true].flatMap((turns) => CORNERS.map((from) => ({ along, from, turns }))),
);

/** How many tiles a line of the walk has. */
export function lineLength({ along }: ShotOrder, box: Box): number {
  return along === "rows" ? box.right - box.left + 1 : box.bottom - box.top + 1;
}

/**
 * The how-manieth tile of a walk a label is: 0 is the first of the box.
 * @returns any whole number: lines before the box are negative, lines after it go on
 */
export function walkIndex(walk: ShotOrder, label: Label, box: Box): number {
  const down = walk.from.startsWith("top") ? label.row - box.top : box.bottom - label.row;
  const across = walk.from.endsWith("left") ? label.column - box.left : box.right - label.column;
  const [line, along] = walk.along === "rows" ? [down, across] : [across, down];
  const length = lineLength(walk, box);
  const isBack = walk.turns && Math.abs(line % 2) === 1;
  return line * length + (isBack ? length - 1 - along : along);
}

/** The opposite of `walkIndex`. */
export function walkLabel(walk: ShotOrder, index: number, box: Box): Label {
  const length = lineLength(walk, box);
  const line = Math.floor(index / length);
  const place = index - line * length;
  const isBack = walk.turns && Math.abs(line % 2) === 1;
  const along = isBack ? length - 1 - place : place;
  const [down, across] = walk.along === "rows" ? [line, along] : [along, line];
  return {
    row: walk.from.startsWith("top") ? box.top + down : box.bottom - down,
    column: walk.from.endsWith("left") ? box.left + across : box.right - across,
  };
}

/** Smallest box that holds the labels; null for none. */
export function boxOf(labels: readonly Label[]): Box | null {
  if (labels.length === 0) return null;
  const rows = labels.map((label) => label.row);
  const columns = labels.map((label) => label.column);
  return {
    top: rows.reduce((a, b) => Math.min(a, b)),
    left: columns.reduce((a, b) => Math.min(a, b)),
    bottom: rows.reduce((a, b) => Math.max(a, b)),
    right: columns.reduce((a, b) => Math.max(a, b)),
  };
}

/** Share of steps from tile to tile that must follow a walk for the grid to have been walked so. Our own. */
const LEAST_FOLLOWED = 0.8;

/**
 * How the grid was walked.
 * @param places - places of the first takes in the order shot, one list per camera
 * @returns null where no walk explains four of five steps, or there are fewer than two tiles
 */
export function findShotOrder(places: readonly (readonly Label[])[]): ShotOrder | null {
  const best = bestWalk(places);
  return best && best.steps > 0 && best.followed / best.steps >= LEAST_FOLLOWED ? best.walk : null;
}

/** Share of the steps from tile to tile that one walk explains; 1 where there are none. */
export function followedShare(places: readonly (readonly Label[])[]): number {
  const best = bestWalk(places);
  return best && best.steps > 0 ? best.followed / best.steps : 1;
}

/** How many steps from tile to tile no walk explains; 0 for fewer than two tiles. */
export function countBreaks(places: readonly Label[]): number {
  const best = bestWalk([places]);
  return best ? best.steps - best.followed : 0;
}

function bestWalk(
  places: readonly (readonly Label[])[],
): { readonly walk: ShotOrder; readonly steps: number; readonly followed: number } | null {
  const box = boxOf(places.flat());
  if (!box) return null;
  let best: { walk: ShotOrder; steps: number; followed: number } | null = null;
  for (const walk of WALKS) {
    let steps = 0;
    let followed = 0;
    for (const list of places) {
      const indices = list.map((label) => walkIndex(walk, label, box));
      indices.slice(1).forEach((index, at) => {
        const step = index - (indices[at] ?? 0);
        steps++;
        // A hole is stepped over; further on, the walk says nothing.
        if (step === 1) followed += 1;
        else if (step === 2 || step === 3) followed += 0.9;
      });
    }
    if (!best || followed > best.followed + 1e-9) best = { walk, steps, followed };
  }
  return best;
}
