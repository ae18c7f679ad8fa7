import type { ReactNode } from "react";
import type { BoardIndex } from "@/lib/board/board-index";
import { boardStatus } from "@/lib/board/summary";

interface StatusLineProps {
  readonly index: BoardIndex;
  /** Whether all changes are saved; null where the reader makes none. */
  readonly saved: ReactNode;
}

/** The foot of the board: what it holds, in figures, and whether all is saved. */
export function StatusLine({ index, saved }: StatusLineProps) {
  return (
    <div className="figures flex flex-wrap gap-x-7 gap-y-0.5 border-t border-ink bg-paper px-4 py-1.5 text-sm text-quiet">
      <ul aria-label="The board in figures" className="flex flex-wrap gap-x-7 gap-y-0.5">
        {boardStatus(index).map((fact) => (
          <li key={fact}>{fact}</li>
        ))}
      </ul>
      {saved !== null && <div className="ml-auto">{saved}</div>}
    </div>
  );
}
