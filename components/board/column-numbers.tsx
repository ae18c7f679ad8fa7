import { LOOSE } from "@/components/board/use-board-place";
import { classNames } from "@/components/ui/class-names";
import { isLabelled, type BoardLayout } from "@/lib/board/layout";
import { countOf } from "@/lib/board/words";

interface ColumnNumbersProps {
  readonly columns: number;
  readonly layout: BoardLayout;
  readonly looseCount: number;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
}

/** The line of numbers above the grid; it stays in view. In its corner, where letters meet numbers, the loose frames. */
export function ColumnNumbers({ columns, layout, looseCount, chosen, onChoose }: ColumnNumbersProps) {
  const isOpen = chosen === LOOSE;
  return (
    <div
      className="sticky top-0 z-30 flex h-10 items-center bg-well"
      style={{ gap: layout.gapPx, minWidth: "fit-content" }}
    >
      <div
        className="sticky left-0 z-10 -mr-px shrink-0 bg-well"
        style={{ width: layout.lettersWidthPx - layout.gapPx }}
      >
        {looseCount > 0 && (
          <button
            type="button"
            aria-expanded={isOpen}
            aria-label={`${countOf(looseCount, "loose frame")}: frames in no stack`}
            onClick={() => onChoose(isOpen ? null : LOOSE)}
            className={classNames(
              "min-h-6 border bg-paper px-1 text-sm leading-6 font-semibold whitespace-nowrap pointer-coarse:min-h-11",
              isOpen ? "border-petrol outline-2 outline-petrol" : "border-line hover:bg-ink hover:text-paper",
            )}
          >
            Loose {looseCount}
          </button>
        )}
      </div>
      {Array.from({ length: columns }, (_, at) => (
        <span key={at} aria-hidden className="flex shrink-0 justify-center" style={{ width: layout.tileWidthPx }}>
          {isLabelled(at + 1, labelPx(columns), layout.tileWidthPx + layout.gapPx) && (
            <span
              className={classNames(
                "figures bg-paper font-bold",
                layout.size === "map" ? "px-0.5 text-[0.75rem] leading-4" : "px-1.5 text-sm leading-5",
              )}
            >
              {at + 1}
            </span>
          )}
        </span>
      ))}
    </div>
  );
}

/** Room for the widest number and its padding, px. */
function labelPx(columns: number): number {
  return String(columns).length * 8 + 5;
}
