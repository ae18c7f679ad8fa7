"use client";

import { useMemo, useState, type ReactNode } from "react";
import { Bench, LooseBench } from "@/components/board/bench";
import { BoardHand } from "@/components/board/board-hand";
import { BoardBar } from "@/components/board/board-bar";
import { Docket } from "@/components/board/docket";
import { SelectionBar } from "@/components/board/selection-bar";
import { SmallBoard } from "@/components/board/small-board";
import { StatusLine } from "@/components/board/status-line";
import { TileGrid } from "@/components/board/tile-grid";
import { TileTable } from "@/components/board/tile-table";
import { LOOSE, type BoardViewName } from "@/components/board/use-board-place";
import { useElementSize } from "@/components/board/use-element-size";
import { useDocket } from "@/components/board/use-docket";
import { TimeRail } from "@/components/rail/time-rail";
import { BoardTools } from "@/components/together/board-tools";
import type { BoardIndex } from "@/lib/board/board-index";
import { questionMove } from "@/lib/board/docket-answers";
import type { BoardQuestion } from "@/lib/board/model";

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
  const docket = useDocket({ index, chosen, onChoose });
  const { question } = docket;
  const asked = useMemo(() => askedTiles(index, question), [index, question]);
  // As on the rail's other marks: a question about most of a stack marks no single frame.
  const askedNow = useMemo(
    () => new Set(question?.frameIds.filter((id) => index.askedFrames.has(id))),
    [index, question],
  );
  const askedMove = useMemo(() => question && questionMove(index, question), [index, question]);
  const docketLine = <Docket index={index} docket={docket} chosen={chosen} onShowTile={onChoose} />;
  const tools = <BoardTools index={index} chosen={chosen} onChoose={onChoose} />;
  if (!isWide) {
    return (
      <BoardHand index={index}>
        <SmallBoard {...{ index, chosen, onChoose, tools, saved }} docket={docketLine} askedPlace={docket.place} />
        <SelectionBar index={index} />
      </BoardHand>
    );
  }
  return (
    <BoardHand index={index}>
      <div className="grid min-h-0 flex-1 grid-cols-[248px_minmax(0,1fr)] grid-rows-[minmax(0,1fr)]">
        <TimeRail index={index} askedNow={askedNow} chosen={chosen} onChoose={onChoose} />
        <div className="flex min-h-0 flex-col">
          {docketLine}
          <BoardBar view={view} onShow={onShow} isAllSeams={isAllSeams} onAllSeams={setIsAllSeams} tools={tools} />
          {view === "grid" ? (
            <TileGrid
              {...{ index, chosen, onChoose, isAllSeams, asked, askedMove }}
              askedPlace={question?.tile ?? [...asked][0] ?? null}
            />
          ) : (
            <TableWithBench index={index} chosen={chosen} onChoose={onChoose} />
          )}
        </div>
      </div>
      <SelectionBar index={index} />
      <StatusLine index={index} saved={saved} />
    </BoardHand>
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

function findTile(index: BoardIndex, name: string) {
  return index.tiles.get(name) ?? index.unplaced.find((tile) => tile.name === name);
}

/** The places that a question is about, and the one where its frame may belong. */
function askedTiles(index: BoardIndex, question: BoardQuestion | null): ReadonlySet<string> {
  if (!question) return new Set();
  const named = question.stackIds.flatMap((id) => index.tileOfStack.get(id)?.name ?? []);
  return new Set(
    [...named, question.tile, questionMove(index, question)?.tile].filter((name) => typeof name === "string"),
  );
}
