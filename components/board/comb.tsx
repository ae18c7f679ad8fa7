import { combBars } from "@/lib/board/comb";
import type { BoardFrame } from "@/lib/board/model";

const HEIGHT_PX = 14;
/** The comb never grows wider: with many frames its bars get thinner. */
const WIDEST_PX = 62;

/** A bar per frame, from the soft limit up to the best of the tile; hollow: set aside; a dot: cannot tell. */
export function Comb({ frames }: { readonly frames: readonly BoardFrame[] }) {
  const stepPx = Math.min(8, WIDEST_PX / Math.max(1, frames.length));
  const barPx = Math.max(1.5, stepPx - (stepPx > 4 ? 1.5 : 0.5));
  return (
    <svg aria-hidden width={stepPx * frames.length} height={HEIGHT_PX} className="shrink-0">
      {combBars(frames).map((bar, at) => {
        const heightPx = bar.height === null ? 2 : Math.max(2.5, bar.height * HEIGHT_PX);
        return (
          <rect
            key={bar.frameId}
            x={at * stepPx + (bar.isSetAside ? 0.5 : 0)}
            y={HEIGHT_PX - heightPx + (bar.isSetAside ? 0.5 : 0)}
            width={barPx - (bar.isSetAside ? 1 : 0)}
            height={heightPx - (bar.isSetAside ? 1 : 0)}
            className={bar.isSetAside ? "fill-paper stroke-ink" : "fill-ink opacity-75"}
          />
        );
      })}
    </svg>
  );
}
