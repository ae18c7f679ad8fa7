import type { ReactNode } from "react";
import type { BoardViewName } from "@/components/board/use-board-place";
import { classNames } from "@/components/ui/class-names";

interface BoardBarProps {
  readonly view: BoardViewName;
  readonly onShow: (view: BoardViewName) => void;
  readonly isAllSeams: boolean;
  readonly onAllSeams: (isAll: boolean) => void;
  /** At the right. */
  readonly tools: ReactNode;
}

const VIEWS = [
  { name: "grid", label: "Even grid" },
  { name: "table", label: "Table" },
] as const;

/** The slim bar above the sheet: how it is drawn, and what can be done with all of it. */
export function BoardBar({ view, onShow, isAllSeams, onAllSeams, tools }: BoardBarProps) {
  return (
    <div className="flex flex-wrap items-center gap-x-5 border-b border-hairline bg-tray px-4 text-sm">
      <div role="group" aria-label="How the board is drawn" className="flex gap-5">
        {VIEWS.map(({ name, label }) => (
          <button
            key={name}
            type="button"
            aria-pressed={view === name}
            onClick={() => onShow(name)}
            className={classNames(
              "min-h-8 border-b-3 pt-0.5 font-semibold pointer-coarse:min-h-11",
              view === name ? "border-petrol" : "border-transparent text-quiet hover:border-line",
            )}
          >
            {label}
          </button>
        ))}
      </div>
      {view === "grid" && (
        <label className="flex min-h-8 items-center gap-2 pointer-coarse:min-h-11">
          <input
            type="checkbox"
            checked={isAllSeams}
            onChange={(event) => onAllSeams(event.target.checked)}
            className="size-4 accent-petrol"
          />
          All overlaps
        </label>
      )}
      <div className="ml-auto flex flex-wrap items-center gap-x-3">{tools}</div>
    </div>
  );
}
