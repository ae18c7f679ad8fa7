import { spawnSync } from "node:child_process";
import { mkdtemp, readFile, rm } from "node:fs/promises";
import { readdirSync } from "node:fs";
import { createRequire } from "node:module";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { ExifTool, type Tags } from "exiftool-vendored";
import sharp from "sharp";
import { afterAll, beforeAll, describe, expect, test } from "vitest";

import { readMetadata } from "@/lib/metadata/read-metadata";

// ExifTool, in exiftool-vendored 35.21.0, is the other reader; the pictures are those of the npm packages named here.
const hasPerl = spawnSync("perl", ["-v"]).status === 0;
const FOLDERS = [
  ["exif", "test"],
  ["exif-parser", "test"],
  ["jpeg-exif", "test"],
  ["jpg-stream", "test/images"],
] as const;

const require = createRequire(import.meta.url);
const pictures = FOLDERS.flatMap(([name, folder]) => {
  const path = join(packageFolder(name), folder);
  const files = readdirSync(path).filter((file) => /\.(jpe?g|tiff?)$/i.test(file));
  return files.map((file) => [`${name}/${file}`, join(path, file)] as const);
});

/** Folder of an installed package, also where its exports hide package.json. */
function packageFolder(name: string): string {
  const found = require.resolve.paths(name)?.map((modules) => join(modules, name)) ?? [];
  const folder = found.find((path) => spawnSync("test", ["-d", path]).status === 0);
  if (folder === undefined) throw new Error(`${name} is not installed`);
  return folder;
}

describe.skipIf(!hasPerl)("EXIF as ExifTool reads it (skipped without Perl)", () => {
  let exiftool: ExifTool;
  beforeAll(() => {
    exiftool = new ExifTool({ maxProcs: 1 });
  });
  afterAll(() => exiftool.end());

  /** Numbers as numbers, times as written, of the EXIF blocks alone. */
  const read = (path: string): Promise<Tags & Record<string, unknown>> =>
    exiftool.readRaw(path, { readArgs: ["-n", "-EXIF:all", "-fast"] });

  test.each(pictures)("%s", async (_name, path) => {
    const [expected, metadata] = [await read(path), await readMetadata(await readFile(path))];
    const text = (value: unknown) => (value === undefined ? null : String(value).trim() || null);
    const number = (value: unknown) => (typeof value === "number" && value > 0 ? value : null);
    expect(metadata.make).toBe(text(expected.Make));
    expect(metadata.model).toBe(text(expected.Model));
    expect(metadata.lens).toBe(text(expected.LensModel));
    expect(metadata.serial).toBe(text(expected.SerialNumber));
    expectNumber(metadata.exposureSeconds, number(expected.ExposureTime));
    expectNumber(metadata.aperture, number(expected.FNumber));
    expectNumber(metadata.iso, number(expected.ISO));
    expectNumber(metadata.focalLengthMm, number(expected.FocalLength));
    expect(metadata.orientation).toBe(expected.Orientation ?? 1);
    const time = text(expected.DateTimeOriginal) ?? text(expected.CreateDate);
    const written = time === null ? null : time.replace(/^(\d+):(\d+):(\d+) /, "$1-$2-$3T");
    expect(metadata.takenAt?.local.slice(0, 19) ?? null).toBe(written);
    expect(metadata.takenAt?.local.split(".")[1] ?? null).toBe(text(expected.SubSecTimeOriginal));
  });

  test("a TIFF and a PNG that ExifTool wrote", async () => {
    const folder = await mkdtemp(join(tmpdir(), "stackyard-exif-"));
    for (const format of ["tiff", "png"] as const) {
      const path = join(folder, `picture.${format}`);
      await sharp({ create: { width: 30, height: 20, channels: 3, background: "#456" } })
        .toFormat(format)
        .toFile(path);
      const tags = {
        Make: "Harbour Optics",
        ExposureTime: "1/250",
        FocalLength: "200",
        ISO: 64,
        DateTimeOriginal: "2030:05:01 10:00:00",
        SubSecTimeOriginal: "07",
        OffsetTimeOriginal: "-03:30",
        SerialNumber: "0042",
      };
      await exiftool.write(path, tags, { writeArgs: ["-overwrite_original"] });
      expect(await readMetadata(await readFile(path))).toMatchObject({
        make: "Harbour Optics",
        exposureSeconds: 0.004,
        focalLengthMm: 200,
        iso: 64,
        serial: "0042",
        takenAt: { local: "2030-05-01T10:00:00.07", offsetMinutes: -210, hasFraction: true },
      });
    }
    await rm(folder, { recursive: true });
  });
});

/** Rationals are divided on both sides; ExifTool prints them with ten digits or so. */
function expectNumber(found: number | null, expected: number | null): void {
  if (found === null || expected === null) expect(found).toBe(expected);
  else expect(found / expected).toBeCloseTo(1, 6);
}

test.each([
  ["nothing", Buffer.alloc(0)],
  ["garbage", Buffer.from("\xff\xd8\xff\xe1\xff\xffExif\0\0MM\0*\xff\xff\xff\xff", "latin1")],
  ["text", Buffer.from("Dear diary")],
])("%s has no metadata, and no error", async (_name, file) => {
  expect(await readMetadata(file)).toMatchObject({ takenAt: null, make: null, orientation: 1 });
});
