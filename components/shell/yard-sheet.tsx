const ROWS = 3;
const COLUMNS = 5;
const TILE_WIDTH = 132;
const TILE_HEIGHT = 92;
const STEP_X = 96;
const STEP_Y = 68;
// How far each tile sits from its even place: a hand-turned head is never exact. Invented figures.
const DRIFT: readonly (readonly [number, number])[] = [
  [0, 4], [3, -2], [-2, 1], [4, 3], [-1, -3],
  [2, 1], [-3, 4], [1, -2], [0, 2], [3, 0],
  [-2, -1], [1, 3], [4, -3], [-3, 1], [2, 4],
]; // prettier-ignore
const SHARPNESS: readonly number[] = [8, 11, 10, 6, 12, 9];

/** A drawing for the sign-in page: tiles laid over each other as they were shot, one still a hole. Decoration only. */
export function YardSheet({ className }: { readonly className?: string }) {
  const places = Array.from({ length: ROWS * COLUMNS }, (_, index) => index);
  return (
    <svg viewBox="0 0 560 290" aria-hidden className={className}>
      {places.map((index) => (
        <YardTile key={index} index={index} />
      ))}
    </svg>
  );
}

const HOLE = 8;

function YardTile({ index }: { readonly index: number }) {
  const [driftX, driftY] = DRIFT[index] ?? [0, 0];
  const x = 22 + (index % COLUMNS) * STEP_X + driftX;
  const y = 28 + Math.floor(index / COLUMNS) * STEP_Y + driftY;
  if (index === HOLE) {
    return (
      <rect
        x={x + 40}
        y={y + 28}
        width={TILE_WIDTH - 76}
        height={TILE_HEIGHT - 52}
        className="fill-none stroke-paper"
        strokeWidth="1.5"
        strokeDasharray="4 4"
      />
    );
  }
  return (
    <g className="fill-paper stroke-paper">
      <rect x={x} y={y} width={TILE_WIDTH} height={TILE_HEIGHT} fillOpacity="0.16" strokeOpacity="0.75" />
      <g stroke="none" transform={`translate(${x + 8} ${y + 22})`}>
        {SHARPNESS.map((height, bar) => (
          <rect
            key={bar}
            x={bar * 6}
            y={-((height + index * (bar + 3)) % 9) - 4}
            width="4"
            height={((height + index * (bar + 3)) % 9) + 4}
          />
        ))}
      </g>
    </g>
  );
}
