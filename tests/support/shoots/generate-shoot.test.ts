import { createHash } from "node:crypto";
import { mkdtemp, readdir, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { exiftool } from "exiftool-vendored";
import sharp from "sharp";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { generateShoot } from "./generate-shoot";
import { SHOOT_KINDS } from "./kinds";
import { make24MpFrames } from "./make-24mp-frames";
import { planShoot } from "./plan-shoot";
import { overlapBetween, type ShootTruth } from "./shoot-truth";
import { walk } from "./walk";

const SMALL = { widthPx: 240, heightPx: 160 };
let directory = "";

beforeAll(async () => {
  directory = await mkdtemp(path.join(tmpdir(), "shoots-"));
});
afterAll(async () => {
  await exiftool.end();
  await rm(directory, { recursive: true, force: true });
});

async function listFiles(below: string): Promise<string[]> {
  const entries = await readdir(below, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => path.relative(below, path.join(entry.parentPath, entry.name)).split(path.sep).join("/"))
    .sort();
}

async function hashFiles(below: string): Promise<string[]> {
  const files = await listFiles(below);
  return Promise.all(
    files.map(
      async (file) =>
        `${file} ${createHash("sha256")
          .update(await readFile(path.join(below, file)))
          .digest("hex")}`,
    ),
  );
}

/** Variance of the 4-neighbour Laplacian of the green channel (Pech-Pacheco et al. 2000), inner pixels. */
async function sharpnessOf(file: string): Promise<number> {
  const { data, info } = await sharp(file).raw().toBuffer({ resolveWithObject: true });
  const level = (x: number, y: number) => data[(y * info.width + x) * info.channels + 1] ?? 0;
  let sum = 0;
  let squares = 0;
  for (let y = 1; y < info.height - 1; y++) {
    for (let x = 1; x < info.width - 1; x++) {
      const value = level(x - 1, y) + level(x + 1, y) + level(x, y - 1) + level(x, y + 1) - 4 * level(x, y);
      sum += value;
      squares += value * value;
    }
  }
  const count = (info.width - 2) * (info.height - 2);
  return squares / count - (sum / count) ** 2;
}

test("a serpentine walk of 3 x 4 from the top left visits the places in the order of the worked example", () => {
  // check-values.md E42, constructed by hand.
  const order = { along: "rows", from: "top-left", turns: true } as const;
  expect(walk(3, 4, order).map(({ row, column }) => `${row},${column}`)).toEqual(
    "1,1 1,2 1,3 1,4 2,4 2,3 2,2 2,1 3,1 3,2 3,3 3,4".split(" "),
  );
});

test("every kind can be planned with many seeds, and no row or column is left empty", () => {
  for (const kind of SHOOT_KINDS) {
    for (let seed = 0; seed < 8; seed++) {
      const { recipe, shots, sceneSize, size } = planShoot(kind, seed, SMALL);
      const rows = new Set(shots.flatMap(({ place }) => place?.row ?? []));
      const columns = new Set(shots.flatMap(({ place }) => place?.column ?? []));
      expect(`${kind} ${rows.size} x ${columns.size}`).toBe(`${kind} ${recipe.rows} x ${recipe.columns}`);
      const centres = shots.map(({ pose }) => pose.centreXPx);
      expect(Math.min(...centres)).toBeGreaterThan(size.widthPx * 0.4);
      expect(Math.max(...centres)).toBeLessThan(sceneSize.widthPx - size.widthPx * 0.4);
    }
  }
});

test("an unknown kind is refused with the list of those that exist", async () => {
  await expect(generateShoot("underwater", 1, directory, SMALL)).rejects.toThrow(/expected kind to be one of clean,/);
});

describe("a clean shoot of 3 rows, 6 columns and 6 frames", () => {
  let truth: ShootTruth;
  let shoot = "";
  beforeAll(async () => {
    shoot = path.join(directory, "clean");
    truth = await generateShoot("clean", 7, shoot, SMALL);
  });

  test("has 108 frames in 18 stacks", async () => {
    // Common practice: rows x columns x frames.
    expect(truth.frames).toHaveLength(108);
    expect(truth.stacks).toHaveLength(18);
    expect(await listFiles(shoot)).toHaveLength(108);
  });

  test("knows the truth of every file", async () => {
    expect(truth.frames.map(({ file }) => file).sort()).toEqual(await listFiles(shoot));
    for (const frame of truth.frames) {
      const stack = truth.stacks[frame.stack ?? -1];
      expect(stack?.files).toContain(frame.file);
      expect([stack?.row, stack?.column, stack?.take]).toEqual([frame.row, frame.column, frame.take]);
    }
    // Seams of a full grid: 3 x 5 to the right, 2 x 6 below.
    expect(truth.seams).toHaveLength(27);
    for (const { overlap } of truth.seams) expect(Math.abs(overlap - 0.33)).toBeLessThan(0.02);
  });

  test("writes EXIF that ExifTool reads", async () => {
    const [first] = truth.frames;
    const tags = await exiftool.readRaw(path.join(shoot, first?.file ?? ""), { readArgs: ["-n"] });
    expect(tags).toMatchObject({
      DateTimeOriginal: "2027:04:18 09:41:12.34+02:00",
      SubSecTimeOriginal: 34,
      OffsetTimeOriginal: "+02:00",
      ExposureTime: 0.004,
      FNumber: 8,
      ISO: 100,
      FocalLength: 105,
      Make: "Aldmoor",
      SerialNumber: 4402117,
      LensModel: "Aldmoor 70-200 mm f/4",
    });
  });

  test("comes out byte for byte the same again, and differs with the seed", async () => {
    const again = path.join(directory, "again");
    const other = path.join(directory, "other");
    await generateShoot("clean", 7, again, SMALL);
    await generateShoot("clean", 10, other, SMALL);
    const hashes = await hashFiles(shoot);
    expect(await hashFiles(again)).toEqual(hashes);
    expect(await hashFiles(other)).not.toEqual(hashes);
  });
});

test("soft frames are measurably softer than the sharpest of their stack", async () => {
  const shoot = path.join(directory, "soft");
  for (const seed of [0, 1, 2]) {
    const truth = await generateShoot("soft", seed, shoot, { widthPx: 480, heightPx: 320 });
    const soft = truth.frames.filter(({ softSigmaPx }) => softSigmaPx >= 1);
    expect(soft.length).toBeGreaterThan(0);
    for (const frame of soft) {
      const sharp = truth.frames.find(({ stack, softSigmaPx }) => stack === frame.stack && softSigmaPx === 0);
      const ratio =
        (await sharpnessOf(path.join(shoot, frame.file))) / (await sharpnessOf(path.join(shoot, sharp?.file ?? "")));
      // The noise, equal in both, bounds it from below.
      expect(ratio).toBeLessThan(0.93);
    }
  }
});

test("a portrait shoot is stored lying and marked to be turned", async () => {
  const shoot = path.join(directory, "portrait");
  const truth = await generateShoot("portrait", 2, shoot, SMALL);
  const metadata = await sharp(path.join(shoot, truth.frames[0]?.file ?? "")).metadata();
  expect([metadata.width, metadata.height]).toEqual([240, 160]);
  // Exif 2.2, tag 0x0112: 6 and 8 need a quarter turn.
  expect([6, 8]).toContain(metadata.orientation);
  expect(truth.size).toEqual({ widthPx: 160, heightPx: 240 });
});

test("copies, raw companions and roll-over are written as the truth says", async () => {
  const doubled = path.join(directory, "doubled");
  const copies = (await generateShoot("doubled-files", 3, doubled, SMALL)).frames.filter(
    ({ duplicateOf }) => duplicateOf,
  );
  expect(copies.length).toBeGreaterThan(1);
  for (const { file, duplicateOf } of copies) {
    expect(await readFile(path.join(doubled, file))).toEqual(await readFile(path.join(doubled, duplicateOf ?? "")));
  }
  const raw = path.join(directory, "raw");
  const [first] = (await generateShoot("raw-beside", 3, raw, SMALL)).frames;
  await expect(sharp(path.join(raw, first?.rawFile ?? "")).metadata()).rejects.toThrow();
  const over = await generateShoot("roll-over", 3, path.join(directory, "over"), SMALL);
  const at = over.frames.findIndex(({ file }) => file.endsWith("9999.JPG"));
  // DCF (CIPA DC-009): after 9999 comes 0001 in the next folder.
  expect(over.frames[at + 1]?.file).toMatch(/0001\.JPG$/);
  expect(Number(over.frames[at + 1]?.file.slice(0, 3))).toBe(Number(over.frames[at]?.file.slice(0, 3)) + 1);
});

test("overlap of two frames side by side is what their distance says", () => {
  const pose = { centreXPx: 500, centreYPx: 300, rollRad: 0, zoom: 1, distortion: 0, sphere: null };
  // check-values.md E33: a thumbnail of 300 x 200 with a third of overlap; its right neighbour lies 200 px away.
  const overlap = overlapBetween(pose, { ...pose, centreXPx: 700 }, { widthPx: 300, heightPx: 200 }, "right");
  expect(overlap).toBeCloseTo(1 / 3, 6);
});

test("a frame for the benches has the size of a real camera's, in pixels and bytes", async () => {
  const large = path.join(directory, "large");
  const [file] = await make24MpFrames(large, 1, 1);
  const bytes = await readFile(path.join(large, file ?? ""));
  const { width, height } = await sharp(bytes).metadata();
  expect([width, height]).toEqual([6000, 4000]);
  // From memory: cameras of 24 megapixels write fine JPEGs of 8 to 12 MB.
  expect(bytes.length).toBeGreaterThan(8e6);
  expect(bytes.length).toBeLessThan(12e6);
});
