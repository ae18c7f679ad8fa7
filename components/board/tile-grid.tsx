"use client";

import { useVirtualizer } from "@tanstack/react-virtual";
import { useCallback, useEffect, useMemo, useRef, useState, type KeyboardEvent } from "react";
import { Bench, LooseBench } from "@/components/board/bench";
import { useBoardCommands } from "@/components/board/board-commands";
import { ColumnNumbers } from "@/components/board/column-numbers";
import { DropArea } from "@/components/board/drop-area";
import { gridLines, neighbourPlace, type GridLine, type GridPlace } from "@/components/board/grid-rows";
import { hasHoleLink } from "@/components/board/hole";
import { useHand } from "@/components/board/hand";
import { QuestionGesture } from "@/components/board/question-gesture";
import { TileRow } from "@/components/board/tile-row";
import { LOOSE } from "@/components/board/use-board-place";
import { useElementSize } from "@/components/board/use-element-size";
import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import { gridOrigin, layoutBoard, picturePart, tileSteps, type BoardLayout } from "@/lib/board/layout";
import { seamMarksByRow } from "@/lib/board/seam-marks";

interface TileGridProps {
  readonly index: BoardIndex;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
  readonly isAllSeams: boolean;
  /** Tiles that the docket's question names. */
  readonly asked: ReadonlySet<string>;
  /** The place the docket's question is about: brought into view when the docket turns; null: none. */
  readonly askedPlace: string | null;
  /** What the docket's question would bring together; null: nothing. */
  readonly askedMove: { readonly frameId: string; readonly tile: string } | null;
}

/** The padding of the well, both sides together, px: at the right there is room for a new column's places. */
const WELL_PADDING_PX = 48;
/** The line of numbers above the tiles, the room for an outline below it, the padding at the foot, px. */
const NUMBERS_AND_EDGES_PX = 62;

/** The sheet: tiles in their rows on the well, the bench unfolded between them. Only rows in view are drawn. */
export function TileGrid({ index, chosen, onChoose, isAllSeams, asked, askedPlace, askedMove }: TileGridProps) {
  const { canEdit, announce } = useBoardCommands();
  const [sizeRef, size] = useElementSize();
  const scroller = useRef<HTMLDivElement | null>(null);
  const [scrollerElement, setScrollerElement] = useState<HTMLDivElement | null>(null);
  const geometry = useMemo(() => {
    const steps = tileSteps(index);
    return { steps, origin: gridOrigin(index, steps) };
  }, [index]);
  const { projectId, grid } = index.board;
  const widthPx = (size?.width ?? 0) - WELL_PADDING_PX;
  const heightPx = (size?.height ?? 0) - NUMBERS_AND_EDGES_PX;
  const aspect = geometry.steps.acrossPx / geometry.steps.downPx;
  const layout = useMemo(
    () => layoutBoard({ columns: grid.columns, widthPx, heightPx, aspect }),
    [grid.columns, widthPx, heightPx, aspect],
  );
  const partOf = useCallback((tile: BoardTile) => picturePart(tile, geometry.steps, geometry.origin), [geometry]);
  const lines = useMemo(() => gridLines(index, chosen), [index, chosen]);
  const seams = useMemo(() => seamMarksByRow(index, isAllSeams), [index, isAllSeams]);
  const rowHeightPx = layout.pictureHeightPx + layout.captionHeightPx + layout.gapPx;
  const virtualizer = useVirtualizer({
    count: size === null ? 0 : lines.length,
    getScrollElement: () => scrollerElement,
    estimateSize: (at) => estimateLine(lines[at], rowHeightPx),
    getItemKey: (at) => lines[at]?.key ?? at,
    overscan: 2,
    // The outline of a chosen tile in the first row needs room below the numbers.
    paddingStart: 6,
  });
  useEffect(() => virtualizer.measure(), [virtualizer, rowHeightPx]);
  const hand = useHand();
  useEffect(() => {
    hand.reveal = (target) => {
      const wished = target.kind === "place" ? Math.min(target.row, grid.rows) : 1;
      const at = lines.findIndex((line) => line.kind === "row" && line.row === wished);
      if (at >= 0) virtualizer.scrollToIndex(at, { align: "auto" });
    };
    return () => {
      hand.reveal = null;
    };
  });
  useEffect(() => {
    const made = hand.takeAwaited(index.unplaced);
    if (!made) return;
    const at = lines.findIndex((line) => line.kind === "unplaced" && line.tiles.includes(made));
    if (at >= 0) virtualizer.scrollToIndex(at, { align: "auto" });
    announce(`${made.name} has no place yet. It is below the last row.`);
  }, [index, lines, hand, virtualizer, announce]);
  useShowAsked(askedPlace, (name) => {
    const row = index.tiles.get(name)?.row ?? index.holes.get(name)?.row;
    const at = lines.findIndex((line) => line.kind === "row" && line.row === row);
    if (at >= 0) virtualizer.scrollToIndex(at, { align: "auto" });
  });
  useShowChosen({ lines, chosen, scroller, scrollTo: (at) => virtualizer.scrollToIndex(at, { align: "auto" }) });

  const scrollerRef = useCallback(
    (element: HTMLDivElement | null) => {
      scroller.current = element;
      setScrollerElement(element);
      return sizeRef(element);
    },
    [sizeRef],
  );

  const moveTo = askedMove && index.tiles.get(askedMove.tile);
  const moveToLine = lines.findIndex((line) => line.kind === "row" && line.row === moveTo?.row);
  const moveToTopPx = virtualizer.measurementsCache[moveToLine]?.start;
  const items = virtualizer.getVirtualItems();
  const tabStop = findTabStop({ index, chosen, lines: items.flatMap((item) => lines[item.index] ?? []) });
  const focusPlace = (place: GridPlace) => {
    virtualizer.scrollToIndex(
      lines.findIndex((line) => line.kind === "row" && line.row === place.row),
      { align: "auto" },
    );
    requestAnimationFrame(() => scroller.current?.querySelector<HTMLElement>(`[data-tile="${place.name}"]`)?.focus());
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const name = event.target instanceof HTMLElement ? event.target.dataset.tile : undefined;
    const from = name === undefined ? undefined : (index.tiles.get(name) ?? index.holes.get(name));
    const next = from ? neighbourPlace(index, from, event.key, canEdit && hasHoleLink(layout)) : null;
    // The keys belong to what is carried.
    if (hand.get().carried) return;
    if (event.key === "Escape" && chosen !== null) onChoose(null);
    if (!next) return;
    event.preventDefault();
    focusPlace(next);
  };

  return (
    <div
      ref={scrollerRef}
      role="group"
      aria-label="Board: arrow keys move from place to place, Enter opens a tile"
      onKeyDown={onKeyDown}
      className="relative min-h-0 flex-1 overflow-auto bg-well pr-8 pb-8 pl-4"
    >
      <ColumnNumbers
        {...{ index, layout, onChoose, canEdit }}
        // Only what concerns it: choosing a tile leaves it as it is.
        chosen={chosen === LOOSE ? LOOSE : null}
      />
      <DropArea id="well" style={{ height: virtualizer.getTotalSize() }}>
        {items.map((item) => {
          const line = lines[item.index];
          return line ? (
            <div
              key={item.key}
              data-index={item.index}
              // The height of a row is known; measuring every row would draw the sheet anew for each.
              ref={line.kind === "row" ? undefined : virtualizer.measureElement}
              className={line.kind === "row" ? "absolute top-0 left-0" : "absolute top-0 left-0 z-20 w-full"}
              style={{ transform: `translateY(${item.start}px)` }}
            >
              <Line
                {...{ line, index, layout, chosen, onChoose, asked, tabStop, widthPx, partOf, projectId, canEdit }}
                marks={(line.kind === "row" && seams.get(line.row)) || NO_MARKS}
              />
            </div>
          ) : null;
        })}
        {askedMove && moveTo && moveToTopPx !== undefined && (
          <QuestionGesture
            frameId={askedMove.frameId}
            tile={{
              left: tileLeftPx(moveTo, layout),
              top: moveToTopPx,
              width: layout.tileWidthPx,
              height: layout.pictureHeightPx + layout.captionHeightPx,
            }}
          />
        )}
      </DropArea>
    </div>
  );
}

/** Left edge of a tile on the sheet, px. */
function tileLeftPx({ column }: BoardTile, layout: BoardLayout): number {
  return ((column ?? 1) - 1) * (layout.tileWidthPx + layout.gapPx) + layout.lettersWidthPx;
}

const NO_MARKS: Parameters<typeof TileRow>[0]["marks"] = [];

interface LineProps extends Omit<TileGridProps, "isAllSeams" | "askedPlace" | "askedMove"> {
  readonly line: GridLine;
  readonly layout: BoardLayout;
  readonly projectId: string;
  readonly canEdit: boolean;
  readonly tabStop: string | null;
  readonly widthPx: number;
  readonly marks: Parameters<typeof TileRow>[0]["marks"];
  readonly partOf: Parameters<typeof TileRow>[0]["partOf"];
}

function Line({ line, widthPx, ...rest }: LineProps) {
  const { index, layout, onChoose } = rest;
  if (line.kind === "loose") return <LooseBench index={index} widthPx={widthPx} onClose={() => onChoose(null)} />;
  if (line.kind === "bench") {
    return (
      <Bench
        key={line.tile.name}
        index={index}
        tile={line.tile}
        widthPx={widthPx}
        mouth={{
          leftPx: line.tile.row === null ? null : tileLeftPx(line.tile, layout),
          widthPx: layout.tileWidthPx,
          gapPx: layout.gapPx,
          opens: line.opens,
        }}
        onClose={() => onChoose(null)}
      />
    );
  }
  if (line.kind === "unplaced") return <TileRow tiles={line.tiles} isFirst={line.isFirst} {...rest} />;
  // A row is told only what concerns it, so that choosing a tile draws two rows anew and not all of them.
  const isHere = (name: string | null) => name !== null && index.tiles.get(name)?.row === line.row;
  return (
    <TileRow
      row={line.row}
      {...rest}
      chosen={isHere(rest.chosen) ? rest.chosen : null}
      tabStop={isHere(rest.tabStop) ? rest.tabStop : null}
    />
  );
}

/** The chosen tile where it is drawn, else the first tile that is: one of the grid is always in the tab order. */
function findTabStop(input: { index: BoardIndex; chosen: string | null; lines: readonly GridLine[] }): string | null {
  const rows = new Set(input.lines.flatMap((line) => (line.kind === "row" ? [line.row] : [])));
  const chosen = input.chosen === null ? undefined : input.index.tiles.get(input.chosen);
  if (chosen && chosen.row !== null && rows.has(chosen.row)) return chosen.name;
  for (const tile of input.index.tiles.values()) {
    if (tile.row !== null && rows.has(tile.row)) return tile.name;
  }
  return null;
}

function estimateLine(line: GridLine | undefined, rowHeightPx: number): number {
  if (!line || line.kind === "row") return rowHeightPx;
  return line.kind === "unplaced" ? rowHeightPx + 40 : 220;
}

/** Shows the place of the docket's question when it turns to another; a board just opened stays at its top. */
function useShowAsked(place: string | null, show: (place: string) => void) {
  const shown = useRef(place);
  useEffect(() => {
    if (place !== null && place !== shown.current) show(place);
    shown.current = place;
  });
}

/** Brings a newly chosen tile's row and bench into view, without moving anything that is in view already. */
function useShowChosen(input: {
  readonly lines: readonly GridLine[];
  readonly chosen: string | null;
  readonly scroller: { readonly current: HTMLElement | null };
  readonly scrollTo: (at: number) => void;
}) {
  const latest = useRef(input);
  useEffect(() => {
    latest.current = input;
  });
  const isReady = input.lines.length > 0;
  useEffect(() => {
    const { lines, chosen, scroller, scrollTo } = latest.current;
    if (chosen === null || !isReady) return;
    const benchAt = lines.findIndex((line) => line.kind === "bench" || line.kind === "loose");
    if (benchAt < 0) return;
    scrollTo(benchAt);
    const line = lines[benchAt];
    const isBenchAbove = line?.kind === "bench" && line.opens === "down";
    const timer = setTimeout(() => {
      const well = scroller.current;
      const bench = well?.querySelector<HTMLElement>("[data-bench]");
      const tile = well?.querySelector<HTMLElement>(`[data-tile="${CSS.escape(chosen)}"]`);
      // The upper of the two last: where both have no room, the head of what is read first stays in view.
      for (const part of isBenchAbove ? [tile, bench] : [bench, tile]) {
        const isTall = well && part && part.offsetHeight > well.clientHeight;
        part?.scrollIntoView({ block: isTall ? "start" : "nearest" });
      }
    }, 60);
    return () => clearTimeout(timer);
  }, [input.chosen, isReady]);
}
