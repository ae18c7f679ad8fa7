import { memo } from "react";
import { EdgePlaces } from "@/components/board/edge-places";
import { Hole } from "@/components/board/hole";
import { LineMenu } from "@/components/board/line-menu";
import { SeamChips } from "@/components/board/seam-chips";
import { Tile } from "@/components/board/tile";
import { Chip } from "@/components/ui/chip";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import { isLabelled, type BoardLayout, type PicturePart } from "@/lib/board/layout";
import type { SeamMark } from "@/lib/board/seam-marks";
import { rowLetters, tileName } from "@/lib/board/tile-name";
import { countOf } from "@/lib/board/words";

interface TileRowProps {
  readonly index: BoardIndex;
  readonly projectId: string;
  readonly layout: BoardLayout;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
  readonly asked: ReadonlySet<string>;
  readonly tabStop: string | null;
  readonly marks: readonly SeamMark[];
  readonly partOf: (tile: BoardTile) => PicturePart;
  readonly canEdit: boolean;
  /** A row of the grid, 1 is the top; or, without it, `tiles` that have no place. */
  readonly row?: number;
  readonly tiles?: readonly BoardTile[];
  readonly isFirst?: boolean;
}

/** One row of places: its letter, its tiles and holes, the overlaps on its seams. */
export const TileRow = memo(function TileRow({ row, tiles = [], isFirst = false, ...rest }: TileRowProps) {
  const { index, layout, projectId } = rest;
  const names =
    row === undefined
      ? tiles.map((tile) => tile.name)
      : Array.from({ length: index.board.grid.columns }, (_, at) => tileName(row, at + 1));
  const byName = new Map(tiles.map((tile) => [tile.name, tile]));
  return (
    <>
      {isFirst && (
        <p className="flex h-10 items-end pb-1">
          <Chip tone="ochre">
            {countOf(index.unplaced.length, "stack")} without a place: drag to a place, or “Move to…”
          </Chip>
        </p>
      )}
      <div
        role="group"
        aria-label={row === undefined ? "Stacks without a place" : `Row ${rowLetters(row)}`}
        className="relative flex items-start"
        style={{ gap: layout.gapPx, paddingBottom: layout.gapPx }}
      >
        <span
          className="sticky left-0 z-10 flex shrink-0 items-center justify-end pr-2"
          style={{ width: layout.lettersWidthPx - layout.gapPx, height: layout.pictureHeightPx }}
        >
          {row !== undefined && <RowLetter {...{ index, layout, row }} canEdit={rest.canEdit} />}
        </span>
        {names.map((name) => {
          const hole = index.holes.get(name);
          if (hole) return <Hole key={name} {...{ projectId, hole, layout }} isAsked={rest.asked.has(name)} />;
          const tile = index.tiles.get(name) ?? byName.get(name);
          return tile ? (
            <Tile
              key={name}
              projectId={projectId}
              tile={tile}
              part={rest.partOf(tile)}
              layout={layout}
              isChosen={name === rest.chosen}
              isTabStop={name === rest.tabStop || row === undefined}
              isAsked={rest.asked.has(name)}
              canEdit={rest.canEdit}
              onChoose={rest.onChoose}
            />
          ) : null;
        })}
        <SeamChips marks={rest.marks} layout={layout} />
        {row !== undefined && rest.canEdit && (
          <EdgePlaces row={row} rows={index.board.grid.rows} columns={index.board.grid.columns} layout={layout} />
        )}
      </div>
    </>
  );
});

interface RowLetterProps extends Pick<TileRowProps, "index" | "layout" | "canEdit"> {
  readonly row: number;
}

/** As high as a menu's target needs; without a menu a letter may stand closer. */
const MENU_PX = 24;
const LETTER_PX = 14;

function RowLetter({ index, layout, row, canEdit }: RowLetterProps) {
  const pitchPx = layout.pictureHeightPx + layout.captionHeightPx + layout.gapPx;
  if (!isLabelled(row, canEdit ? MENU_PX : LETTER_PX, pitchPx)) return null;
  if (canEdit) return <LineMenu index={index} axis="row" at={row} />;
  return (
    <span
      aria-hidden
      className={classNames(
        "figures bg-paper font-bold",
        layout.size === "map" ? "px-1 text-[0.75rem] leading-3.5" : "px-1.5 text-sm leading-5",
      )}
    >
      {rowLetters(row)}
    </span>
  );
}
