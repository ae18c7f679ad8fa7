import { softenLikeALens } from "../lens";
import type { FrameSize } from "../pose";
import { clampToByte, makeField, type Raster } from "../raster";
import { mixSeeds } from "../seeded-random";
import { addFractalNoise } from "../value-noise";

const STONE_PX = 118;

/** The paving before the photographer's feet: what a release pressed by mistake takes a picture of. */
export function drawCobbles(size: FrameSize, seed: number): Raster {
  const { widthPx, heightPx } = size;
  const fine = makeField(widthPx, heightPx);
  addFractalNoise(fine, { cellPx: 60, smallestCellPx: 1.6, strength: 0.6, gain: 0.8, seed: mixSeeds(seed, 951) });
  const data = new Uint8Array(widthPx * heightPx * 3);
  const stonesAround = makePaving(seed);
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const noise = fine.data[y * widthPx + x] as number;
      const [atX, atY] = [x + 5 * noise, y + 5 * noise];
      const stone = nearestStone(atX, atY, stonesAround(Math.floor(atX / STONE_PX), Math.floor(atY / STONE_PX)));
      const joint = Math.max(0, Math.min(1, (stone.margin - 5) / 9));
      const dome = 0.82 + 0.2 * Math.min(1, stone.margin / 40) + 0.0011 * (stone.dx + stone.dy);
      const light = (0.34 + 0.66 * joint * dome) * (1 + 0.1 * noise) * (1 + 0.14 * stone.tone);
      const at = (y * widthPx + x) * 3;
      data[at] = clampToByte((132 + 16 * stone.tone) * light);
      data[at + 1] = clampToByte((126 + 8 * stone.tone) * light);
      data[at + 2] = clampToByte((118 - 4 * stone.tone) * light);
    }
  }
  const raster = { data, widthPx, heightPx };
  softenLikeALens(raster);
  return raster;
}

interface Stone {
  readonly x: number;
  readonly y: number;
  /** -1 to 1. */
  readonly tone: number;
}

/** Finds the stones around a cell of their lattice; each cell's are worked out once. */
function makePaving(seed: number): (column: number, row: number) => readonly Stone[] {
  const known = new Map<number, readonly Stone[]>();
  const layStone = (c: number, r: number): Stone => {
    const chance = mixSeeds(seed, 952, r, c);
    return {
      x: (c + 0.5 + (r % 2) * 0.3 + 0.3 * ((chance & 255) / 255 - 0.5)) * STONE_PX,
      y: (r + 0.5 + 0.3 * (((chance >>> 8) & 255) / 255 - 0.5)) * STONE_PX,
      tone: ((chance >>> 16) & 255) / 127.5 - 1,
    };
  };
  return (column, row) => {
    const key = row * 4096 + column;
    const present = known.get(key);
    if (present) return present;
    const around = [-1, 0, 1].flatMap((down) => [-1, 0, 1].map((across) => layStone(column + across, row + down)));
    known.set(key, around);
    return around;
  };
}

/** The stone a point belongs to, and how far it lies from the joint, px. Source: cellular noise (Worley 1996). */
function nearestStone(
  x: number,
  y: number,
  stones: readonly Stone[],
): { margin: number; tone: number; dx: number; dy: number } {
  let nearest = Infinity;
  let second = Infinity;
  let stone: Stone | undefined;
  for (const candidate of stones) {
    const dx = x - candidate.x;
    const dy = y - candidate.y;
    const squared = dx * dx + dy * dy;
    if (squared < nearest) {
      second = nearest;
      nearest = squared;
      stone = candidate;
    } else if (squared < second) second = squared;
  }
  if (!stone) throw new Error("expected stones around every point");
  return { margin: Math.sqrt(second) - Math.sqrt(nearest), tone: stone.tone, dx: stone.x - x, dy: stone.y - y };
}
