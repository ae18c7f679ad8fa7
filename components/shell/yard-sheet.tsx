import { rowLetters, tileName } from "@/lib/board/tile-name";

const ROWS = 3;
const COLUMNS = 5;
const TILE = { width: 138, height: 98 };
const STEP = { x: 100, y: 70 };
const MARGIN = { x: 40, y: 40 };
const SHEET = { width: 640, height: 340 };
const HOLE = 8;
// How far each tile sits from its even place: a hand-turned head is never exact. Invented figures.
const DRIFT: readonly (readonly [number, number])[] = [
  [0, 5], [4, -3], [-3, 2], [5, 4], [-1, -4],
  [2, 1], [-4, 5], [1, -3], [0, 2], [4, 0],
  [-3, -2], [1, 4], [5, -4], [-4, 1], [2, 5],
]; // prettier-ignore

/** A drawing for the sign-in page: one scene, shot as overlapping tiles, one of them missing. Decoration only. */
export function YardSheet({ className }: { readonly className?: string }) {
  const tiles = DRIFT.map((_, index) => tileAt(index)).filter((tile) => tile.index !== HOLE);
  const hole = tileAt(HOLE);
  return (
    <svg viewBox={`0 0 ${SHEET.width} ${SHEET.height}`} aria-hidden className={className}>
      <defs>
        <clipPath id="shot">
          {tiles.map(({ index, x, y }) => (
            <rect key={index} x={x} y={y} width={TILE.width} height={TILE.height} />
          ))}
        </clipPath>
      </defs>
      <g clipPath="url(#shot)">
        <Scene />
      </g>
      <g className="fill-none stroke-paper" strokeOpacity="0.55" strokeWidth="0.75">
        {tiles.map(({ index, x, y }) => (
          <rect key={index} x={x} y={y} width={TILE.width} height={TILE.height} />
        ))}
      </g>
      <rect
        x={hole.x + 40}
        y={hole.y + 30}
        width={TILE.width - 78}
        height={TILE.height - 60}
        className="fill-paper stroke-ochre"
        strokeWidth="1.5"
        strokeDasharray="4 3"
      />
      <text x={hole.x + 71} y={hole.y + 53} textAnchor="middle" className="fill-ochre text-[9px] font-bold">
        {tileName(2, 4)} is a hole
      </text>
      <Edges />
    </svg>
  );
}

function tileAt(index: number) {
  const [driftX, driftY] = DRIFT[index] ?? [0, 0];
  const x = MARGIN.x + (index % COLUMNS) * STEP.x + driftX;
  return { index, x, y: MARGIN.y + Math.floor(index / COLUMNS) * STEP.y + driftY };
}

/** Letters and numbers on paper chips at the edges. */
function Edges() {
  const columns = Array.from({ length: COLUMNS }, (_, column) => column);
  const rows = Array.from({ length: ROWS }, (_, row) => row);
  return (
    <g className="text-[10px] font-bold">
      {columns.map((column) => (
        <EdgeChip key={column} x={MARGIN.x + column * STEP.x + 69} y={20} text={String(column + 1)} />
      ))}
      {rows.map((row) => (
        <EdgeChip key={row} x={18} y={MARGIN.y + row * STEP.y + 52} text={rowLetters(row + 1)} />
      ))}
    </g>
  );
}

function EdgeChip({ x, y, text }: { readonly x: number; readonly y: number; readonly text: string }) {
  return (
    <>
      <rect x={x - 8} y={y - 8} width="16" height="14" className="fill-paper" />
      <text x={x} y={y + 2.5} textAnchor="middle" className="fill-ink">
        {text}
      </text>
    </>
  );
}

// Greys of the drawn scene. They stand for a photograph, so they are neutral and the same in both themes.
const GREY = { sky: "#d2d2d2", far: "#b4b4b4", hills: "#8f8f8f", wall: "#4a4a4a", sheds: "#2e2e2e", water: "#bdbdbd" };

function Scene() {
  return (
    <>
      <rect width={SHEET.width} height={SHEET.height} fill={GREY.sky} />
      <path d={ridge(128, 26, 0.6)} fill={GREY.far} />
      <path d={ridge(158, 15, 2.4)} fill={GREY.hills} />
      <rect y="204" width={SHEET.width} height="140" fill={GREY.water} />
      <rect y="196" width={SHEET.width} height="12" fill={GREY.wall} />
      <path d={SHEDS} fill={GREY.sheds} />
      <path d={MASTS} stroke={GREY.sheds} strokeWidth="1.2" fill="none" />
      <path d={WAVES} stroke={GREY.hills} strokeWidth="1" fill="none" />
    </>
  );
}

/** A skyline of three sine waves, closed below the sheet. */
function ridge(base: number, height: number, phase: number): string {
  const points = Array.from({ length: 65 }, (_, index) => {
    const x = index * 10;
    const wave = Math.sin(x / 83 + phase) + 0.5 * Math.sin(x / 31 + 2 * phase) + 0.25 * Math.sin(x / 12 + phase);
    return `${x},${(base - height * wave).toFixed(1)}`;
  });
  return `M0,${SHEET.height}L${points.join("L")}L${SHEET.width},${SHEET.height}Z`;
}

const SHEDS = [70, 128, 212, 262, 398, 468, 540]
  .map((x, index) => {
    const width = 34 + (index % 3) * 9;
    const eaves = 178 - (index % 2) * 8;
    return `M${x},198V${eaves}L${x + width / 2},${eaves - 12}L${x + width},${eaves}V198Z`;
  })
  .join("");

const MASTS = [182, 190, 334, 350, 362, 452]
  .map((x, index) => `M${x},206V${150 - (index % 3) * 9}M${x},${158 - (index % 3) * 9}L${x + 11},${190}`)
  .join("");

const WAVES = Array.from({ length: 26 }, (_, index) => {
  const x = (index * 97) % 610;
  const y = 218 + ((index * 37) % 100);
  return `M${x},${y}h${14 + ((index * 13) % 30)}`;
}).join("");
