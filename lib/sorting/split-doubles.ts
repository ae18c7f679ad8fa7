import { mode, quantile } from "./robust";
import type { Join, SplitResult } from "./split-stacks";
import type { SortFrame } from "./types";

/** A run that may be one tile shot twice: it has the frames of two, with a pause between them. */
export interface Doubled {
  /** First frame after the pause. */
  readonly atFrameId: string;
  readonly pauseS: number;
}

/** Halves of this share of the usual number of frames are whole stacks. Our own. */
const WHOLE_SHARE = 0.8;
/** Parts of this share may be; together they have this many times the usual number. Our own. */
const HALF_SHARE = 0.6;
const LEAST_DOUBLE = 1.5;
/** A pause so much longer than nearly all moves was no move: the tile was taken again later. Our own. */
const LONG_PAUSE_FACTOR = 1.5;
const NEARLY_ALL = 0.9;

/**
 * Tells a tile that was shot again later, without another tile in between, from one with a pause in it. The pictures
 * are the same in both; the count and a pause beyond all moves make it two takes, a pause like a move makes it a doubt.
 */
export function splitDoubles(split: SplitResult): SplitResult & { readonly doubled: readonly Doubled[] } {
  const usual = mode(split.runs.flatMap((run) => run.map(() => run.length))) ?? 1;
  const joins = [...split.joins.values()];
  const moves = joins.flatMap((join) => (!join.isSame && join.pauseS !== null ? [join.pauseS] : []));
  const longest = moves.length > 0 ? quantile(moves, NEARLY_ALL) : Infinity;
  const doubled: Doubled[] = [];
  const changed = new Map(split.joins);
  const runs = split.runs.flatMap((run): (readonly SortFrame[])[] => {
    const at = findMiddlePause(run, usual, split);
    const frame = at === null ? undefined : run[at];
    const join = frame && split.joins.get(frame.id);
    if (at === null || !frame || !join || join.pauseS === null || join.basis === "person") return [run];
    const areWhole = Math.min(at, run.length - at) >= WHOLE_SHARE * usual;
    if (!areWhole || join.pauseS <= longest * LONG_PAUSE_FACTOR) {
      doubled.push({ atFrameId: frame.id, pauseS: join.pauseS });
      return [run];
    }
    changed.set(frame.id, { ...join, isSame: false, basis: "time" });
    return [run.slice(0, at), run.slice(at)];
  });
  return { ...split, runs, joins: changed, doubled };
}

/** Where the longest pause cuts a run of about twice the usual size into two that may be stacks; null where it does not. */
function findMiddlePause(run: readonly SortFrame[], usual: number, { joins, limit }: SplitResult): number | null {
  if (usual < 2 || !limit || run.length < LEAST_DOUBLE * usual) return null;
  let longest: { at: number; join: Join } | null = null;
  run.forEach((frame, at) => {
    const join = joins.get(frame.id);
    if (at === 0 || !join || join.pauseS === null || join.pauseS <= limit.seconds) return;
    if (!longest || join.pauseS > (longest.join.pauseS ?? 0)) longest = { at, join };
  });
  const found = (longest as { at: number; join: Join } | null)?.at ?? null;
  if (found === null) return null;
  return Math.min(found, run.length - found) >= HALF_SHARE * usual ? found : null;
}
