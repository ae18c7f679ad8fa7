"use client";

import { useMemo, useState, type ReactNode } from "react";
import { Bench, LooseBench } from "@/components/board/bench";
import { BoardBar } from "@/components/board/board-bar";
import { Docket } from "@/components/board/docket";
import { SmallBoard } from "@/components/board/small-board";
import { StatusLine } from "@/components/board/status-line";
import { TileGrid } from "@/components/board/tile-grid";
import { TileTable } from "@/components/board/tile-table";
import { LOOSE, type BoardViewName } from "@/components/board/use-board-place";
import { useElementSize } from "@/components/board/use-element-size";
import { TimeRail } from "@/components/rail/time-rail";
import type { BoardIndex } from "@/lib/board/board-index";

interface SheetProps {
  readonly index: BoardIndex;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
  readonly view: BoardViewName;
  readonly onShow: (view: BoardViewName) => void;
  /** Room for rail and grid; otherwise the table and one tile at a time. */
  readonly isWide: boolean;
  /** Whether all is saved; null for viewers. */
  readonly saved: ReactNode;
}

/** The board as it is drawn: docket, rail, grid or table, bench, status line. */
export function Sheet({ index, chosen, onChoose, view, onShow, isWide, saved }: SheetProps) {
  const [isAllSeams, setIsAllSeams] = useState(false);
  const { questions } = index.board;
  const docket = useDocket(index, chosen);
  const question = questions[docket.at];
  const asked = useMemo(() => askedTiles(index, question?.stackIds ?? []), [index, question]);
  const docketLine = question && (
    <Docket index={index} question={question} at={docket.at} onTurn={docket.turn} onShowTile={onChoose} />
  );
  if (!isWide)
    return <SmallBoard index={index} chosen={chosen} onChoose={onChoose} docket={docketLine} saved={saved} />;
  return (
    <>
      <div className="grid min-h-0 flex-1 grid-cols-[248px_minmax(0,1fr)] grid-rows-[minmax(0,1fr)]">
        <TimeRail index={index} chosen={chosen} onChoose={onChoose} />
        <div className="flex min-h-0 flex-col">
          {docketLine}
          <BoardBar view={view} onShow={onShow} isAllSeams={isAllSeams} onAllSeams={setIsAllSeams} />
          {view === "grid" ? (
            <TileGrid
              {...{ index, chosen, onChoose, isAllSeams, asked }}
              askedPlace={question?.tile ?? [...asked][0] ?? null}
            />
          ) : (
            <TableWithBench index={index} chosen={chosen} onChoose={onChoose} />
          )}
        </div>
      </div>
      <StatusLine index={index} saved={saved} />
    </>
  );
}

function TableWithBench({ index, chosen, onChoose }: Pick<SheetProps, "index" | "chosen" | "onChoose">) {
  const [ref, size] = useElementSize();
  const tile = chosen === null ? undefined : findTile(index, chosen);
  const widthPx = (size?.width ?? 0) - 32;
  return (
    <div className="flex min-h-0 flex-1 flex-col">
      <div ref={ref} className="min-h-0 flex-1 overflow-auto px-1">
        <TileTable index={index} chosen={chosen} onChoose={onChoose} />
      </div>
      {size && (tile || chosen === LOOSE) && (
        <div className="max-h-[55%] overflow-auto border-t border-ink bg-well p-4">
          {tile ? (
            <Bench
              key={tile.name}
              index={index}
              tile={tile}
              widthPx={widthPx}
              mouth={null}
              onClose={() => onChoose(null)}
            />
          ) : (
            <LooseBench index={index} widthPx={widthPx} onClose={() => onChoose(null)} />
          )}
        </div>
      )}
    </div>
  );
}

/** Which question the docket shows: it turns to the chosen tile's first one, and stays where a person turned it. */
function useDocket(index: BoardIndex, chosen: string | null) {
  const { questions } = index.board;
  const [shown, setShown] = useState<{ key: string | null; chosen: string | null }>({ key: null, chosen: null });
  if (shown.chosen !== chosen) {
    const current = questions.find((question) => question.key === shown.key);
    const ofTile = questions.find((question) => question.tile === chosen);
    setShown({ key: current?.tile === chosen ? shown.key : (ofTile?.key ?? shown.key), chosen });
  }
  const at = Math.max(
    0,
    questions.findIndex((question) => question.key === shown.key),
  );
  return { at, turn: (to: number) => setShown({ key: questions[to]?.key ?? null, chosen }) };
}

function findTile(index: BoardIndex, name: string) {
  return index.tiles.get(name) ?? index.unplaced.find((tile) => tile.name === name);
}

function askedTiles(index: BoardIndex, stackIds: readonly string[]): ReadonlySet<string> {
  return new Set(stackIds.flatMap((id) => index.tileOfStack.get(id)?.name ?? []));
}
