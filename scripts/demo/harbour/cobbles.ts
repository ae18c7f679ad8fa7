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
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const noise = fine.data[y * widthPx + x] as number;
      const stone = nearestStone(x + 5 * noise, y + 5 * noise, seed);
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

/** The stone a point belongs to, and how far it lies from the joint, px. Source: cellular noise (Worley 1996). */
function nearestStone(x: number, y: number, seed: number): { margin: number; tone: number; dx: number; dy: number } {
  const column = Math.floor(x / STONE_PX);
  const row = Math.floor(y / STONE_PX);
  let nearest = { distance: Infinity, tone: 0, dx: 0, dy: 0 };
  let second = Infinity;
  for (let r = row - 1; r <= row + 1; r++) {
    for (let c = column - 1; c <= column + 1; c++) {
      const chance = mixSeeds(seed, 952, r, c);
      const stoneX = (c + 0.5 + (r % 2) * 0.3 + 0.3 * ((chance & 255) / 255 - 0.5)) * STONE_PX;
      const stoneY = (r + 0.5 + 0.3 * (((chance >>> 8) & 255) / 255 - 0.5)) * STONE_PX;
      const distance = Math.hypot(x - stoneX, y - stoneY);
      if (distance < nearest.distance) {
        second = nearest.distance;
        nearest = { distance, tone: ((chance >>> 16) & 255) / 127.5 - 1, dx: stoneX - x, dy: stoneY - y };
      } else if (distance < second) second = distance;
    }
  }
  return { margin: second - nearest.distance, tone: nearest.tone, dx: nearest.dx, dy: nearest.dy };
}
