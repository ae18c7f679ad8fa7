import Link from "next/link";
import { useBoardCommands } from "@/components/board/board-commands";
import { classNames } from "@/components/ui/class-names";
import type { BoardHole } from "@/lib/board/board-index";
import type { BoardLayout } from "@/lib/board/layout";
import { percent } from "@/lib/board/words";

/** Diagonal stripes of two ochre papers: a pattern, so that colour is not alone. */
const STRIPES = {
  backgroundImage:
    "repeating-linear-gradient(135deg, var(--ochre-wash) 0 10px, color-mix(in srgb, var(--ochre) 18%, var(--ochre-wash)) 10px 20px)",
};

/** Whether there is room for a hole's words and its link. */
export function hasHoleLink({ size, tileWidthPx }: BoardLayout): boolean {
  return size === "full" && tileWidthPx >= 150;
}

interface HoleProps {
  readonly projectId: string;
  readonly hole: BoardHole;
  readonly layout: BoardLayout;
  /** The docket's question is about it. */
  readonly isAsked: boolean;
}

/** A place with no stack: the loudest thing on the sheet; what it costs and what to do. */
export function Hole({ projectId, hole, layout, isAsked }: HoleProps) {
  const loss =
    hole.lostShare > 0.005
      ? `${percent(hole.lostShare)} of this tile's area is in no frame`
      : "its neighbours cover all of it";
  const { canEdit } = useBoardCommands();
  const isRoomy = hasHoleLink(layout);
  return (
    <div
      role="group"
      aria-label={`${hole.name} is a hole: ${loss}`}
      data-place={hole.name}
      style={{
        ...STRIPES,
        width: layout.tileWidthPx,
        height: layout.pictureHeightPx + layout.captionHeightPx,
      }}
      className={classNames(
        "relative flex shrink-0 flex-col items-center justify-center overflow-hidden text-center text-sm text-ochre-on outline-2 -outline-offset-4 outline-dashed outline-ochre",
        isAsked && "z-10 ring-4 ring-ochre-wash",
      )}
    >
      {layout.size === "map" ? (
        <span aria-hidden className="bg-ochre-wash px-0.5 font-bold">
          ×
        </span>
      ) : (
        <span className="flex max-w-full flex-col items-center bg-ochre-wash px-2 py-1">
          <span className={layout.size === "full" ? "text-base font-bold" : "font-bold"}>
            {layout.size === "full" ? `${hole.name} is a hole` : hole.name}
          </span>
          {isRoomy && <span>{loss}</span>}
          {isRoomy && canEdit && (
            // Arrow keys reach it as they reach a tile: in the tab order it would stand between a tile and its bench.
            <Link
              href={`/projects/${projectId}/intake`}
              data-tile={hole.name}
              tabIndex={-1}
              className="link inline-block min-h-6 font-semibold"
            >
              Bring in its frames
            </Link>
          )}
          {!isRoomy && layout.size === "full" && <span>−{percent(hole.lostShare)}</span>}
          {layout.size === "medium" && <span>hole</span>}
        </span>
      )}
    </div>
  );
}
