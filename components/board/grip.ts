import type { HandState } from "@/components/board/hand";
import type { BoardIndex } from "@/lib/board/board-index";
import { targetOfName, tileAt, zoneAt, type Moving, type Target } from "@/lib/board/moving";
import { railRuns, type RailRun } from "@/lib/board/rail";
import { moveBoundary, stepsTo } from "@/lib/board/rail-boundary";

/** The two runs of the rail whose boundary is dragged. */
export interface Boundary {
  readonly before: RailRun;
  readonly after: RailRun;
}

export interface Grip {
  readonly moving: Moving;
  /** Null: frames or a stack are dragged. */
  readonly boundary: Boundary | null;
}

/** What an element of the page takes hold of, as its `data-grip`. */
export const gripOf = {
  frame: (id: string) => `frame:${id}`,
  stack: (id: string) => `stack:${id}`,
  /** @param runKey - of the run before the boundary */
  boundary: (runKey: string) => `boundary:${runKey}`,
};

/** What is picked up with a grip: with a frame that is selected, all that are. Null: there is nothing (any more). */
export function readGrip(index: BoardIndex, selected: HandState["selected"], grip: string): Grip | null {
  const at = grip.indexOf(":");
  const id = grip.slice(at + 1);
  switch (grip.slice(0, at)) {
    case "frame": {
      if (!index.framesById.has(id)) return null;
      const frameIds = selected.has(id) ? [...selected].filter((each) => index.framesById.has(each)) : [id];
      return { moving: { kind: "frames", frameIds }, boundary: null };
    }
    case "stack":
      return index.tileOfStack.has(id) ? { moving: { kind: "stack", stackId: id }, boundary: null } : null;
    case "boundary": {
      const runs = railRuns(index.board.frames, index.board.grid.longestPauseSeconds);
      const runAt = runs.findIndex(({ key }) => key === id);
      const [before, after] = [runs[runAt], runs[runAt + 1]];
      return before && after ? { moving: { kind: "frames", frameIds: [] }, boundary: { before, after } } : null;
    }
    default:
      return null;
  }
}

export interface Aim {
  readonly target: Target | null;
  /** Set where what is moved depends on where it is held, as with a boundary. */
  readonly moving?: Moving;
}

/** What lies under a point of the window, px. */
export function aimAt(index: BoardIndex, { moving, boundary }: Grip, point: { x: number; y: number }): Aim {
  if (boundary) return aimBoundary(boundary, point.y);
  const element = document.elementFromPoint(point.x, point.y);
  const part = element?.closest<HTMLElement>("[data-place], [data-drop]") ?? null;
  return { target: part && targetOfPart(index, moving, part, point) };
}

/** The target that a part of the page is for what is moved; where its tile is taken, the zone under the point answers. */
export function targetOfPart(
  index: BoardIndex,
  moving: Moving,
  part: HTMLElement,
  { x, y }: { readonly x: number; readonly y: number },
): Target | null {
  const { place, drop = "" } = part.dataset;
  if (place === undefined && drop.startsWith("stack:")) return { kind: "stack", stackId: drop.slice(6) };
  const target = targetOfName(index, place ?? drop);
  if (moving.kind !== "stack" || target?.kind !== "place" || !tileAt(index, target)) return target;
  const box = part.getBoundingClientRect();
  const occupied = place === undefined ? undefined : zoneAt(box, { x: x - box.left, y: y - box.top });
  return occupied ? { ...target, occupied } : target;
}

/** The rail has one axis: the line at the pointer's height counts, wherever across the page the pointer is. */
function aimBoundary({ before, after }: Boundary, y: number): Aim {
  const nothing: Aim = { target: null, moving: { kind: "frames", frameIds: [] } };
  const lines = [...before.frames, ...after.frames].flatMap(({ id }) => {
    const box = document.querySelector(`[data-line="${CSS.escape(id)}"]`)?.getBoundingClientRect();
    return box ? [{ id, middle: box.top + box.height / 2 }] : [];
  });
  const [nearest] = lines.sort((a, b) => Math.abs(a.middle - y) - Math.abs(b.middle - y));
  if (!nearest) return nothing;
  const steps = stepsTo(before, after, nearest.id, y > nearest.middle);
  return (steps === null ? null : moveBoundary(before, after, steps)) ?? nothing;
}
