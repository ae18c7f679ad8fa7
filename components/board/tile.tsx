import { Check } from "lucide-react";
import { Comb } from "@/components/board/comb";
import { TilePicture } from "@/components/board/tile-picture";
import { classNames } from "@/components/ui/class-names";
import type { BoardTile } from "@/lib/board/board-index";
import type { BoardLayout, PicturePart } from "@/lib/board/layout";
import { tileLabel } from "@/lib/board/summary";
import { countOf } from "@/lib/board/words";

interface TileProps {
  readonly projectId: string;
  readonly tile: BoardTile;
  readonly part: PicturePart;
  readonly layout: BoardLayout;
  readonly isChosen: boolean;
  /** One tile of the grid is in the tab order; arrow keys reach the others. */
  readonly isTabStop: boolean;
  /** The docket's question names it. */
  readonly isAsked: boolean;
  readonly onChoose: (name: string) => void;
}

/** One place of the grid with a stack: its picture, and its caption where there is room. */
export function Tile({ projectId, tile, part, layout, isChosen, isTabStop, isAsked, onChoose }: TileProps) {
  return (
    <button
      type="button"
      data-tile={tile.name}
      tabIndex={isTabStop ? 0 : -1}
      aria-label={tileLabel(tile)}
      aria-expanded={isChosen}
      onClick={() => onChoose(tile.name)}
      style={{ width: layout.tileWidthPx }}
      className={classNames(
        // The numbers stay above: what is scrolled to must not end up under them.
        "relative block shrink-0 scroll-mt-12 scroll-mb-3 text-left outline-offset-0 focus-visible:z-10 focus-visible:outline-3 focus-visible:outline-ink focus-visible:ring-6 focus-visible:ring-paper",
        isChosen && "z-20 outline-3 outline-petrol ring-5 ring-paper",
        !isChosen && isAsked && "z-10 outline-2 outline-dashed outline-ochre ring-4 ring-ochre-wash",
      )}
    >
      <TilePicture projectId={projectId} tile={tile} part={part} layout={layout} />
      {layout.size === "map" ? <MapMarks tile={tile} /> : <Notch tile={tile} isSlim={layout.size === "medium"} />}
      {layout.size !== "map" && <Caption tile={tile} layout={layout} />}
    </button>
  );
}

/** Ochre paper set into the picture's corner: how many questions the tile has; paper: how many takes. */
function Notch({ tile, isSlim }: { readonly tile: BoardTile; readonly isSlim: boolean }) {
  const count = tile.questions.length;
  return (
    <span className="absolute top-0 left-0 flex text-sm leading-6 font-semibold">
      {count > 0 && (
        <span className="border-r border-b border-ochre bg-ochre-wash px-1.5 text-ochre-on">
          {isSlim ? `${count} ?` : countOf(count, "question")}
        </span>
      )}
      {tile.takes.length > 1 && (
        <span className="border-r border-b border-line bg-paper px-1.5 text-ink">
          {isSlim ? `${tile.takes.length} t` : `${tile.takes.length} takes`}
        </span>
      )}
    </span>
  );
}

function MapMarks({ tile }: { readonly tile: BoardTile }) {
  if (tile.questions.length > 0) {
    return (
      <span className="absolute top-0 left-0 bg-ochre-wash px-0.5 text-[0.75rem] leading-3 font-bold text-ochre-on">
        ?
      </span>
    );
  }
  return tile.isFew ? (
    <span className="absolute bottom-0 left-0 size-1.5 border-t border-r border-paper bg-ochre" />
  ) : null;
}

function Caption({ tile, layout }: { readonly tile: BoardTile; readonly layout: BoardLayout }) {
  const isFull = layout.size === "full";
  const figures = `${tile.inUse}/${tile.frames.length}`;
  return (
    <span
      style={{ height: layout.captionHeightPx }}
      className="figures flex items-center gap-2 overflow-hidden bg-paper px-1.5 text-sm"
    >
      <span className="font-bold">{tile.name}</span>
      {tile.stack.isSettled && <Check aria-hidden size={14} strokeWidth={3} className="-mx-1 shrink-0 text-quiet" />}
      {isFull && <Comb frames={tile.frames} />}
      <span className="ml-auto whitespace-nowrap">
        {tile.isFew ? (
          <span className="bg-ochre-wash px-1 font-semibold text-ochre-on">{isFull ? `${figures} few` : figures}</span>
        ) : (
          isFull && <span className="text-quiet">{figures}</span>
        )}
      </span>
    </span>
  );
}
