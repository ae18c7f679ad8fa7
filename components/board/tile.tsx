import { Check, GripHorizontal } from "lucide-react";
import { memo } from "react";
import { Comb } from "@/components/board/comb";
import { gripOf } from "@/components/board/grip";
import { GRIP_HELP_ID } from "@/components/board/grip-help";
import { useHand, useInHand } from "@/components/board/hand";
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
  readonly canEdit: boolean;
  readonly onChoose: (name: string | null) => void;
}

/** One place of the grid with a stack: its picture, and its caption where there is room. */
export const Tile = memo(function Tile({
  projectId,
  tile,
  part,
  layout,
  isChosen,
  isTabStop,
  isAsked,
  canEdit,
  onChoose,
}: TileProps) {
  const isMap = layout.size === "map";
  return (
    <div
      data-place={tile.name}
      style={{ width: layout.tileWidthPx }}
      className={classNames("group/tile relative shrink-0 focus-within:z-10", isChosen && "z-20", isAsked && "z-10")}
    >
      <button
        type="button"
        data-tile={tile.name}
        // Dragged by its picture, as a frame is; a click still opens it.
        data-grip={canEdit ? gripOf.stack(tile.stack.id) : undefined}
        tabIndex={isTabStop ? 0 : -1}
        aria-label={tileLabel(tile)}
        aria-expanded={isChosen}
        onClick={() => onChoose(isChosen ? null : tile.name)}
        className={classNames(
          // The numbers stay above: what is scrolled to must not end up under them.
          "block w-full scroll-mt-12 scroll-mb-3 text-left outline-offset-0 focus-visible:outline-3 focus-visible:outline-ink focus-visible:ring-6 focus-visible:ring-paper",
          isChosen && "outline-3 outline-petrol ring-5 ring-paper",
          !isChosen && isAsked && "outline-2 outline-dashed outline-ochre ring-4 ring-ochre-wash",
        )}
      >
        <TilePicture projectId={projectId} tile={tile} part={part} layout={layout} />
        {tile.row === null && <NoPlace isSlim={layout.size !== "full"} />}
        {isMap ? <MapMarks tile={tile} /> : <Notch tile={tile} isSlim={layout.size === "medium"} />}
        <SelectedMark tile={tile} layout={layout} />
        {!isMap && <Caption tile={tile} layout={layout} />}
      </button>
      {canEdit && !isMap && <TileHandle tile={tile} isTabStop={isTabStop} isChosen={isChosen} />}
    </div>
  );
}, isDrawnAlike);

/** Every step on the board makes new tile objects; what they hold is kept where nothing changed. */
function isDrawnAlike(before: TileProps, after: TileProps): boolean {
  const { tile: tileBefore, part: partBefore, ...restBefore } = before;
  const { tile: tileAfter, part: partAfter, ...restAfter } = after;
  return (
    isShallowEqual(restBefore, restAfter) && isShallowEqual(partBefore, partAfter) && isSameTile(tileBefore, tileAfter)
  );
}

function isSameTile(before: BoardTile, after: BoardTile): boolean {
  if (before === after) return true;
  const { takes: takesBefore, frames: framesBefore, questions: questionsBefore, ...restBefore } = before;
  const { takes, frames, questions, ...rest } = after;
  return (
    isShallowEqual(restBefore, rest) &&
    isShallowEqual(takesBefore, takes) &&
    isShallowEqual(framesBefore, frames) &&
    isShallowEqual(questionsBefore, questions)
  );
}

function isShallowEqual(before: object, after: object): boolean {
  if (before === after) return true;
  const values = new Map<string, unknown>(Object.entries(before));
  const entries = Object.entries(after);
  return entries.length === values.size && entries.every(([key, value]) => Object.is(values.get(key), value));
}

/** In the picture's lower corner: how many of its frames are selected. */
function SelectedMark({ tile, layout }: Pick<TileProps, "tile" | "layout">) {
  const count = useInHand(({ selected }) =>
    selected.size === 0 ? 0 : tile.frames.filter(({ id }) => selected.has(id)).length,
  );
  if (count === 0) return null;
  const isMap = layout.size === "map";
  return (
    <span
      data-selected-frames={count}
      style={{ bottom: isMap ? 0 : layout.captionHeightPx }}
      className={classNames(
        "figures absolute left-0 bg-petrol font-bold text-petrol-on ring-2 ring-paper",
        isMap ? "px-0.5 text-[0.75rem] leading-3" : "px-1.5 text-sm leading-5",
      )}
    >
      {isMap ? "✓" : `✓ ${count}`}
    </span>
  );
}

type TileHandleProps = Pick<TileProps, "tile" | "isTabStop" | "isChosen">;

/**
 * Paper in the picture's upper corner, away from the notch and from the names of who is there: takes hold of the
 * stack. Out of sight until the tile is looked at.
 */
function TileHandle({ tile, isTabStop, isChosen }: TileHandleProps) {
  const hand = useHand();
  return (
    <button
      type="button"
      data-handle
      data-grip={gripOf.stack(tile.stack.id)}
      tabIndex={isTabStop ? 0 : -1}
      aria-label={`Move ${tile.name}`}
      aria-describedby={GRIP_HELP_ID}
      onClick={() => hand.tap({ kind: "stack", stackId: tile.stack.id })}
      className={classNames(
        "absolute top-0 right-0 inline-flex h-6 w-7 cursor-grab items-center justify-center bg-paper text-ink group-hover/tile:opacity-100 hover:bg-ink hover:text-paper focus-visible:opacity-100 pointer-coarse:hidden",
        isChosen ? "opacity-100" : "opacity-0",
      )}
    >
      <GripHorizontal aria-hidden size={16} />
    </button>
  );
}

/** A stack without a place is in no merge until it has one: marked as what needs a person. */
function NoPlace({ isSlim }: { readonly isSlim: boolean }) {
  return (
    <span className="pointer-events-none absolute inset-0 z-10 flex items-end outline-2 -outline-offset-4 outline-dashed outline-ochre">
      <span className="mb-8 border border-ochre bg-ochre-wash px-1.5 text-sm leading-5 font-semibold text-ochre-on">
        {isSlim ? "no place" : "no place yet"}
      </span>
    </span>
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

function Caption({ tile, layout }: Pick<TileProps, "tile" | "layout">) {
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
