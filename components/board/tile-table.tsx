"use client";

import { useMemo, useState } from "react";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex } from "@/lib/board/board-index";
import { tableRows, type TableColumn, type TableOrder, type TableRow } from "@/lib/board/table-rows";
import { percent } from "@/lib/board/words";

interface TileTableProps {
  readonly index: BoardIndex;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
}

/** `isWide`: left out where the screen is narrow. */
const COLUMNS: readonly { readonly column: TableColumn; readonly label: string; readonly isWide: boolean }[] = [
  { column: "place", label: "Tile", isWide: false },
  { column: "takenAtMs", label: "Taken", isWide: true },
  { column: "inUse", label: "In use", isWide: false },
  { column: "softest", label: "Softest in use", isWide: true },
  { column: "noise", label: "Noise down to", isWide: true },
  { column: "leastOverlap", label: "Least overlap", isWide: false },
  { column: "questions", label: "Questions", isWide: false },
];

/** Every tile as a row of figures; a heading sorts by its column, and once more the other way. */
export function TileTable({ index, chosen, onChoose }: TileTableProps) {
  const [order, setOrder] = useState<TableOrder>({ column: "place", isDescending: false });
  const rows = useMemo(() => tableRows(index, order), [index, order]);
  return (
    <table className="w-full border-collapse text-sm">
      <caption className="sr-only">Tiles: each heading sorts by its column</caption>
      <thead className="sticky top-0 z-10 bg-paper">
        <tr className="border-b border-ink">
          {COLUMNS.map(({ column, label, isWide }) => {
            const isSorted = order.column === column;
            return (
              <th
                key={column}
                scope="col"
                aria-sort={isSorted ? (order.isDescending ? "descending" : "ascending") : undefined}
                className={classNames("p-0 text-left font-semibold", isWide && "max-sm:hidden")}
              >
                <button
                  type="button"
                  onClick={() => setOrder({ column, isDescending: isSorted && !order.isDescending })}
                  className="flex min-h-10 w-full items-center gap-1 px-2 text-left font-semibold -outline-offset-2 hover:bg-tray sm:px-3"
                >
                  {label}
                  <span aria-hidden className="w-3">
                    {isSorted ? (order.isDescending ? "↓" : "↑") : ""}
                  </span>
                </button>
              </th>
            );
          })}
        </tr>
      </thead>
      <tbody className="figures">
        {rows.map((row) => (
          <Row key={row.name} row={row} isChosen={row.name === chosen} onChoose={onChoose} />
        ))}
      </tbody>
    </table>
  );
}

interface RowProps {
  readonly row: TableRow;
  readonly isChosen: boolean;
  readonly onChoose: (name: string | null) => void;
}

const CELL = "px-2 py-1 sm:px-3";

function Row({ row, isChosen, onChoose }: RowProps) {
  return (
    <tr
      data-drop={row.name}
      className={classNames(
        "border-b border-hairline [contain-intrinsic-size:auto_37px] [content-visibility:auto]",
        isChosen && "bg-tray",
      )}
    >
      <th scope="row" className={classNames(CELL, "text-left")}>
        {row.isHole ? (
          <span className="inline-flex min-h-7 items-center gap-2">
            {row.name} <Ochre>hole</Ochre>
          </span>
        ) : (
          <button
            type="button"
            aria-pressed={isChosen}
            onClick={() => onChoose(isChosen ? null : row.name)}
            className="link min-h-7 min-w-11 text-left font-bold pointer-coarse:min-h-11"
          >
            {row.name}
            {row.takes > 1 && <span className="font-normal text-quiet"> {row.takes} takes</span>}
          </button>
        )}
      </th>
      <td className={classNames(CELL, "max-sm:hidden")}>{row.takenAt ?? "–"}</td>
      <td className={CELL}>
        {row.inUse === null ? "–" : `${row.inUse}/${row.frames ?? 0}`} {row.isFew && <Ochre>few</Ochre>}
      </td>
      <td className={classNames(CELL, "max-sm:hidden")}>{row.softest === null ? "–" : percent(row.softest)}</td>
      <td className={classNames(CELL, "max-sm:hidden")}>{row.noise === null ? "–" : percent(row.noise)}</td>
      <td className={CELL}>
        {row.leastOverlap === null ? "–" : percent(row.leastOverlap)} {row.isOverlapSmall && <Ochre>small</Ochre>}
      </td>
      <td className={CELL}>{row.questions > 0 ? <Ochre>{row.questions}</Ochre> : "–"}</td>
    </tr>
  );
}

function Ochre({ children }: { readonly children: React.ReactNode }) {
  return <span className="bg-ochre-wash px-1 font-semibold text-ochre-on">{children}</span>;
}
