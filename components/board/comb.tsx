import { useId } from "react";
import { combBars } from "@/lib/board/comb";
import type { BoardFrame } from "@/lib/board/model";

const HEIGHT_PX = 14;
/** The comb never grows wider: with many frames its bars get thinner. */
const WIDEST_PX = 62;

/** A bar per frame, from the soft limit up to the best of the tile; hollow: set aside; a dot: cannot tell; hatched: measuring. */
export function Comb({ frames }: { readonly frames: readonly BoardFrame[] }) {
  const hatch = useId();
  const bars = combBars(frames);
  const stepPx = Math.min(8, WIDEST_PX / Math.max(1, frames.length));
  const barPx = Math.max(1.5, stepPx - (stepPx > 4 ? 1.5 : 0.5));
  return (
    <svg aria-hidden width={stepPx * frames.length} height={HEIGHT_PX} className="shrink-0">
      {bars.some(({ isMeasuring }) => isMeasuring) && (
        <pattern id={hatch} width={4} height={4} patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <rect width={2} height={4} className="fill-ink opacity-60" />
        </pattern>
      )}
      {bars.map((bar, at) => {
        if (bar.isMeasuring) {
          const size = { width: barPx - 0.5, height: HEIGHT_PX - 1 };
          return (
            <rect
              key={bar.frameId}
              x={at * stepPx + 0.25}
              y={0.5}
              {...size}
              fill={`url(#${hatch})`}
              stroke="var(--line)"
            />
          );
        }
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
