"use client";

import { useEffect, useRef, type ReactNode } from "react";
import { Bench, LooseBench } from "@/components/board/bench";
import { useInHand } from "@/components/board/hand";
import { Picture } from "@/components/board/picture";
import { StatusLine } from "@/components/board/status-line";
import { TileTable } from "@/components/board/tile-table";
import { LOOSE } from "@/components/board/use-board-place";
import { useElementSize } from "@/components/board/use-element-size";
import { Button } from "@/components/ui/button";
import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import { countOf } from "@/lib/board/words";
import { previewUrl } from "@/lib/frames/picture-urls";

interface SmallBoardProps {
  readonly index: BoardIndex;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
  readonly docket: ReactNode;
  readonly tools: ReactNode;
  readonly saved: ReactNode;
  /** What the docket's question opens; null: none. */
  readonly askedPlace: string | null;
}

/** The board where there is no room for it: the table, or one tile at a time, with the docket where it is about that tile. */
export function SmallBoard({ index, chosen, onChoose, docket, askedPlace, tools, saved }: SmallBoardProps) {
  const tile = chosen === null ? undefined : findTile(index, chosen);
  useShowAllToTap(chosen !== null, () => onChoose(null));
  const isOne = tile !== undefined || chosen === LOOSE;
  return (
    <>
      <div className="flex flex-wrap items-center gap-x-3 border-b border-hairline bg-tray px-3 py-1">{tools}</div>
      {(!isOne || askedPlace === chosen) && docket}
      {isOne ? (
        <OneTile index={index} tile={tile ?? null} onChoose={onChoose} />
      ) : (
        <>
          {index.loose.length > 0 && (
            <p className="border-b border-hairline px-3 py-2">
              <Button size="slim" onClick={() => onChoose(LOOSE)}>
                {countOf(index.loose.length, "loose frame")}
              </Button>
            </p>
          )}
          <div className="flex-1">
            <TileTable index={index} chosen={chosen} onChoose={onChoose} />
          </div>
          <StatusLine index={index} saved={saved} />
        </>
      )}
    </>
  );
}

/** What is picked up goes to another tile: the list of all tiles to tap comes by itself. */
function useShowAllToTap(isAway: boolean, showAll: () => void) {
  const isTapping = useInHand(({ carried }) => carried?.by === "taps");
  const latest = useRef({ isAway, showAll });
  useEffect(() => {
    latest.current = { isAway, showAll };
  });
  useEffect(() => {
    if (isTapping && latest.current.isAway) latest.current.showAll();
  }, [isTapping]);
}

interface OneTileProps {
  readonly index: BoardIndex;
  /** Null: the loose frames. */
  readonly tile: BoardTile | null;
  readonly onChoose: (name: string | null) => void;
}

function OneTile({ index, tile, onChoose }: OneTileProps) {
  const [ref, size] = useElementSize();
  const names = [...index.tiles.keys(), ...index.unplaced.map((unplaced) => unplaced.name)];
  const at = tile ? names.indexOf(tile.name) : -1;
  const before = names[at - 1];
  const after = names[at + 1];
  return (
    <div ref={ref} className="flex flex-1 flex-col bg-well">
      <div className="flex flex-wrap gap-2 bg-paper px-3 py-2">
        <Button size="slim" onClick={() => onChoose(null)}>
          All tiles
        </Button>
        {tile && (
          <span className="ml-auto flex gap-2">
            <Button size="slim" disabled={before === undefined} onClick={() => before && onChoose(before)}>
              {before ?? "Tile before"}
            </Button>
            <Button size="slim" disabled={after === undefined} onClick={() => after && onChoose(after)}>
              {after ?? "Tile after"}
            </Button>
          </span>
        )}
      </div>
      {tile?.reference && (
        <Picture
          src={previewUrl(index.board.projectId, tile.reference.id)}
          alt={`Tile ${tile.name}, its reference ${tile.reference.name}`}
          className="max-h-[50dvh] w-full object-contain"
        />
      )}
      {size &&
        (tile ? (
          <Bench key={tile.name} index={index} tile={tile} widthPx={size.width} mouth={null} onClose={null} />
        ) : (
          <LooseBench index={index} widthPx={size.width} onClose={null} />
        ))}
    </div>
  );
}

function findTile(index: BoardIndex, name: string): BoardTile | undefined {
  return index.tiles.get(name) ?? index.unplaced.find((tile) => tile.name === name);
}
