import { expect, test } from "vitest";
import { measurePatchSharpness } from "@/lib/analysis/patch-sharpness";
import { pretendShoot, toSortFrame } from "@/tests/support/accuracy/pretend-shoot";
import { frameSharpness } from "./frame-sharpness";
import { noiseFloorOf } from "./noise-floor";
import type { SortFrame } from "./types";

const [WIDTH, HEIGHT] = [480, 320];
const SOFT_LIMIT = -0.2;

/** Marsaglia's xorshift: the same noise on every machine. */
function noiseOf(seed: number): () => number {
  let state = seed | 1;
  return () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return (state >>> 0) / 2 ** 32 - 0.5;
  };
}

interface Look {
  /** Passes of [1 2 1] / 4 along both axes, each of variance 1/2 px: 1 is an out of focus of 0.7 px. */
  readonly passes?: number;
  /** Rows from the bottom that show detail; the rest is plain. */
  readonly detailRows?: number;
}

/** A frame whose patches are measured as those of real frames are: sky above, foliage below, noise everywhere. */
function frameOf(seed: number, { passes = 0, detailRows = HEIGHT }: Look): SortFrame {
  const scene = noiseOf(7);
  let plane = Float32Array.from({ length: WIDTH * HEIGHT }, (_, i) => {
    const value = scene();
    return i >= (HEIGHT - detailRows) * WIDTH ? value * 240 : 0;
  });
  for (let pass = 0; pass < passes + 1; pass++) plane = soften(plane);
  const noise = noiseOf(seed);
  const data = Uint8Array.from(plane, (value) => Math.max(0, Math.min(255, Math.round(128 + value + noise() * 8))));
  const { patches } = measurePatchSharpness({ data, widthPx: WIDTH, heightPx: HEIGHT }, 255);
  const [pretended] = pretendShoot({
    rows: 1,
    columns: 1,
    framesPerTile: 1,
    order: { along: "rows", from: "top-left", turns: true },
  });
  if (!pretended) throw new Error("no frame");
  const frame = toSortFrame(pretended, seed);
  return { ...frame, measurements: { ...frame.measurements, texture: 0.5, patches } };
}

function soften(plane: Float32Array): Float32Array<ArrayBuffer> {
  const at = (from: Float32Array, x: number, y: number) =>
    from[Math.max(0, Math.min(HEIGHT - 1, y)) * WIDTH + Math.max(0, Math.min(WIDTH - 1, x))] ?? 0;
  const filter = (from: Float32Array, dx: number, dy: number) =>
    from.map((value, i) => {
      const [x, y] = [i % WIDTH, Math.floor(i / WIDTH)];
      return (2 * value + at(from, x - dx, y - dy) + at(from, x + dx, y + dy)) / 4;
    }) as Float32Array<ArrayBuffer>;
  return filter(filter(plane, 1, 0), 0, 1);
}

function verdictsOf(looks: readonly Look[], change: (frame: SortFrame, at: number) => SortFrame = (frame) => frame) {
  const frames = looks.map((look, at) => change(frameOf(at + 11, look), at));
  const plain = frameOf(99, { detailRows: 0 });
  return frameSharpness(frames, SOFT_LIMIT, noiseFloorOf([...frames, plain])).map(({ verdict }) => verdict);
}

test("a frame out of focus by 0.7 px is soft among sharp ones", () => {
  expect(verdictsOf([{}, {}, { passes: 1 }, {}])).toEqual(["sharp", "sharp", "soft", "sharp"]);
});

test("two of four frames out of focus are both soft", () => {
  expect(verdictsOf([{}, { passes: 1 }, { passes: 1 }, {}])).toEqual(["sharp", "soft", "soft", "sharp"]);
});

test("a blur that leaves nothing but noise is soft", () => {
  expect(verdictsOf([{}, {}, { passes: 60 }, {}])).toEqual(["sharp", "sharp", "soft", "sharp"]);
});

test("detail that jitter carries out of the frame is no softness", () => {
  // Roofs along the lower edge of a tile of sky; one frame points a few pixels higher.
  expect(verdictsOf([{ detailRows: 24 }, { detailRows: 24 }, { detailRows: 15 }, { detailRows: 24 }])).toEqual(
    Array(4).fill("sharp"),
  );
  expect(verdictsOf([{ detailRows: 24 }, { detailRows: 24 }, { detailRows: 24, passes: 1 }])).toEqual([
    "sharp",
    "sharp",
    "soft",
  ]);
});

test("a loss at half size alone is no softness: edges fell otherwise between the pixels", () => {
  // As measured on generated house fronts: 24 % less at half size, nothing less at full size.
  const weaker = (frame: SortFrame, at: number): SortFrame => {
    if (at !== 1) return frame;
    const { patches } = frame.measurements;
    const half = patches.half.map((value) => value * 0.76);
    return { ...frame, measurements: { ...frame.measurements, patches: { ...patches, half } } };
  };
  expect(verdictsOf([{}, {}, {}, {}], weaker)).toEqual(Array(4).fill("sharp"));
});
