import type { BoardIndex } from "@/lib/board/board-index";
import { boardStatus } from "@/lib/board/summary";

/** The foot of the board: what it holds, in figures. */
export function StatusLine({ index }: { readonly index: BoardIndex }) {
  return (
    <ul
      aria-label="The board in figures"
      className="figures flex flex-wrap gap-x-7 gap-y-0.5 border-t border-ink bg-paper px-4 py-1.5 text-sm text-quiet"
    >
      {boardStatus(index).map((fact) => (
        <li key={fact}>{fact}</li>
      ))}
    </ul>
  );
}
