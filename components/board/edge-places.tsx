"use client";

import { useInHand } from "@/components/board/hand";
import { classNames } from "@/components/ui/class-names";
import type { BoardLayout } from "@/lib/board/layout";
import { tileName } from "@/lib/board/tile-name";

interface EdgePlacesProps {
  readonly row: number;
  readonly rows: number;
  readonly columns: number;
  readonly layout: BoardLayout;
}

/** New places beyond the right and the lower edge: there while something is carried, so that the grid can grow by it. */
export function EdgePlaces({ row, rows, columns, layout }: EdgePlacesProps) {
  const isCarrying = useInHand(({ carried }) => carried !== null);
  if (!isCarrying) return null;
  return (
    <>
      <EdgePlace
        name={tileName(row, columns + 1)}
        className="top-0 left-full ml-0.5 w-6"
        height={layout.pictureHeightPx + layout.captionHeightPx}
      />
      {row === rows &&
        Array.from({ length: columns }, (_, at) => (
          <EdgePlace
            key={at}
            name={tileName(rows + 1, at + 1)}
            className="top-full h-6"
            width={layout.tileWidthPx}
            left={layout.lettersWidthPx + at * (layout.tileWidthPx + layout.gapPx)}
          />
        ))}
    </>
  );
}

interface EdgePlaceProps {
  readonly name: string;
  readonly className: string;
  readonly height?: number;
  readonly width?: number;
  readonly left?: number;
}

function EdgePlace({ name, className, ...box }: EdgePlaceProps) {
  return (
    <div
      data-place={name}
      style={box}
      className={classNames(
        "figures absolute z-20 flex items-center justify-center overflow-hidden border border-dashed border-ink bg-paper text-sm leading-5 whitespace-nowrap data-aimed:bg-petrol data-aimed:text-petrol-on",
        className,
      )}
    >
      <span className={classNames(box.height !== undefined && "[writing-mode:vertical-rl]")}>{name}</span>
    </div>
  );
}
