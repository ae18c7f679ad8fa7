import type { Label } from "./lattice";
import { boxOf, walkIndex, walkLabel, WALKS, type Box } from "./walks";
import type { ShotOrder } from "./types";

/** One stack in the order shot. */
export interface WalkStop {
  readonly index: number;
  /** Where the pictures put it; null where they say nothing. */
  readonly label: Label | null;
  /** What it costs to leave it out of the grid, for one that may be a stray; null: it is a tile. */
  readonly leaveOutCost: number | null;
}

export interface WalkPlacement {
  readonly walk: ShotOrder;
  /** What disturbs the walk, in holes: 0 for one that is followed all the way. */
  readonly cost: number;
  /** Places of the stops that had none, by stack index; those left out are missing. */
  readonly labels: ReadonlyMap<number, Label>;
  /** How much dearer the best other way is in which any stop would lie elsewhere; 0 is a toss-up. */
  readonly margin: number;
  /** Stops for which the walk has too few or too many places. */
  readonly unsure: ReadonlySet<number>;
}

export interface WalkWishes {
  readonly rows: number | null;
  readonly columns: number | null;
}

// Costs of what disturbs a walk, relative to one hole. Our own, tuned on generated shoots.
const HOLE_COST = 1;
const SURPLUS_COST = 1.6;
const SAME_TILE_COST = 1.5;
const STEP_BACK_COST = 3;
const LONGEST_HOLE_COST = 4;
const LINE_ADDED_COST = 0.3;
const RAGGED_END_COST = 0.25;
const UNWANTED_LINE_COST = 2;
/** Lines that may lie beyond those found by the pictures, at either end. */
const MOST_LINES_ADDED = 8;

/**
 * Gives stacks without texture their places: the order shot is laid along each of the 16 walks, with lines added
 * where the pictures saw none, and the walk that needs the fewest holes, repeats and steps back wins.
 * @param sequences - stacks in the order shot, one list per camera
 * @returns null where no stop has a label to hold on to
 */
export function placeByWalk(sequences: readonly (readonly WalkStop[])[], wishes: WalkWishes): WalkPlacement | null {
  const box = boxOf(sequences.flat().flatMap((stop) => stop.label ?? []));
  if (!box) return null;
  const tries: Try[] = [];
  const most = sequences.flat().some((stop) => !stop.label) ? MOST_LINES_ADDED : 0;
  for (const walk of WALKS) {
    for (let before = 0; before <= most; before++) {
      for (let after = 0; before + after <= most; after++) {
        tries.push(tryWalk(sequences, walk, widen(box, walk, before, after), { wishes, added: before + after }));
      }
    }
  }
  tries.sort((a, b) => a.cost - b.cost);
  const best = tries[0];
  if (!best) return null;
  const rival = tries.find((other) => !isSamePlacement(best.labels, other.labels));
  return { ...best, margin: rival ? rival.cost - best.cost : Infinity };
}

function widen(box: Box, walk: ShotOrder, before: number, after: number): Box {
  if (walk.along === "rows") return { ...box, left: box.left - before, right: box.right + after };
  return { ...box, top: box.top - before, bottom: box.bottom + after };
}

interface Try {
  readonly walk: ShotOrder;
  readonly labels: Map<number, Label>;
  readonly unsure: Set<number>;
  cost: number;
}

function tryWalk(
  sequences: readonly (readonly WalkStop[])[],
  walk: ShotOrder,
  box: Box,
  { wishes, added }: { wishes: WalkWishes; added: number },
): Try {
  const result: Try = { walk, labels: new Map(), unsure: new Set(), cost: added * LINE_ADDED_COST };
  const taken = new Set(sequences.flat().flatMap((stop) => (stop.label ? [walkIndex(walk, stop.label, box)] : [])));
  for (const stops of sequences) {
    let from: number | null = null;
    let run: WalkStop[] = [];
    for (const stop of stops) {
      if (!stop.label) {
        run.push(stop);
        continue;
      }
      const to = walkIndex(walk, stop.label, box);
      layRun(result, run, { from, to, box, taken });
      [from, run] = [to, []];
    }
    layRun(result, run, { from, to: null, box, taken });
  }
  const all = boxOf([...result.labels.values(), ...sequences.flat().flatMap((stop) => stop.label ?? [])]) ?? box;
  if (wishes.rows !== null) result.cost += UNWANTED_LINE_COST * Math.abs(all.bottom - all.top + 1 - wishes.rows);
  if (wishes.columns !== null) {
    result.cost += UNWANTED_LINE_COST * Math.abs(all.right - all.left + 1 - wishes.columns);
  }
  return result;
}

interface Gap {
  /** Walk indices of the placed stops around a run; null at the ends of the shoot. */
  readonly from: number | null;
  readonly to: number | null;
  readonly box: Box;
  readonly taken: Set<number>;
}

/** Lays the stops between two placed ones along the walk, and adds what that costs. */
function layRun(result: Try, run: readonly WalkStop[], gap: Gap): void {
  const { from, to } = gap;
  if (from === null && to === null) return;
  const room = from !== null && to !== null ? to - from - 1 : null;
  if (room !== null && room < 0) result.cost += room === -1 ? SAME_TILE_COST : STEP_BACK_COST;
  const stops = chooseStops(result, run, room !== null && room < 0 ? null : room);
  if (room !== null && room >= 0) {
    const spare = room - stops.length;
    result.cost += spare >= 0 ? Math.min(LONGEST_HOLE_COST, spare * HOLE_COST) : -spare * SURPLUS_COST;
    if (spare !== 0) for (const stop of stops) result.unsure.add(stop.index);
  } else if (room !== null) {
    result.cost += stops.length * SURPLUS_COST * 0.5;
    for (const stop of stops) result.unsure.add(stop.index);
  } else {
    const end = from === null ? (to ?? 0) - stops.length : from + stops.length + 1;
    const length = result.walk.along === "rows" ? gap.box.right - gap.box.left + 1 : gap.box.bottom - gap.box.top + 1;
    if (stops.length > 0 && ((end % length) + length) % length !== 0) result.cost += RAGGED_END_COST;
  }
  const start = from === null ? (to ?? 0) - stops.length : from + 1;
  stops.forEach((stop, offset) => {
    const index = start + offset;
    if (gap.taken.has(index)) {
      result.unsure.add(stop.index);
      return;
    }
    gap.taken.add(index);
    result.labels.set(stop.index, walkLabel(result.walk, index, gap.box));
  });
}

/** Leaves out possible strays, the likeliest first, as far as the walk has no room for them or they are cheap to. */
function chooseStops(result: Try, run: readonly WalkStop[], room: number | null): WalkStop[] {
  const kept = new Set(run);
  const doubtful = run
    .filter((stop) => stop.leaveOutCost !== null)
    .sort((a, b) => (a.leaveOutCost ?? 0) - (b.leaveOutCost ?? 0));
  for (const stop of doubtful) {
    const cost = stop.leaveOutCost ?? 0;
    const isSurplus = room === null ? cost < 0.5 : kept.size > room;
    if (!isSurplus) continue;
    kept.delete(stop);
    result.cost += cost;
  }
  return run.filter((stop) => kept.has(stop));
}

function isSamePlacement(a: ReadonlyMap<number, Label>, b: ReadonlyMap<number, Label>): boolean {
  if (a.size !== b.size) return false;
  for (const [index, label] of a) {
    const other = b.get(index);
    if (other?.row !== label.row || other.column !== label.column) return false;
  }
  return true;
}
