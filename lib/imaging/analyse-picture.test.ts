import { createHash } from "node:crypto";
import { mkdtemp, readFile, readdir, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { deflateSync } from "node:zlib";
import sharp from "sharp";
import { afterAll, beforeAll, describe, expect, test } from "vitest";

import { uprightOrder, uprightSize } from "@/lib/analysis/orientation";
import { analysePicture } from "@/lib/imaging/analyse-picture";
import { cropAtFullSize } from "@/lib/imaging/crop";
import { PictureError } from "@/lib/imaging/picture-error";
import { readRegistrationFile } from "@/lib/imaging/registration-file";
import type { Orientation } from "@/lib/metadata/types";

let folder = "";
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "stackyard-picture-"));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const WIDTH = 96;
const HEIGHT = 64;
/** Colour of the scene at an upright place: red left to right, green top to bottom, a blue corner at the top left. */
const colourAt = (x: number, y: number) => [
  Math.round((x * 255) / 95),
  Math.round((y * 255) / 63),
  x < 24 && y < 16 ? 255 : 0,
];

/** The scene's pixels as a camera held in this orientation stores them. */
function storedScene(orientation: Orientation) {
  const size = uprightSize(WIDTH, HEIGHT, orientation);
  const data = Buffer.alloc(WIDTH * HEIGHT * 3);
  uprightOrder(size.widthPx, size.heightPx, orientation).forEach((stored, shown) => {
    data.set(colourAt(shown % WIDTH, Math.floor(shown / WIDTH)), stored * 3);
  });
  return sharp(data, { raw: { width: size.widthPx, height: size.heightPx, channels: 3 } });
}

const outputs = (name: string) => ({
  previewPath: join(folder, "out", `${name}-preview.jpg`),
  thumbnailPath: join(folder, "out", `${name}-thumbnail.jpg`),
  registrationPath: join(folder, "out", `${name}.reg`),
});
const none = { previewPath: null, thumbnailPath: null, registrationPath: null };

async function put(name: string, content: Buffer | string): Promise<string> {
  const path = join(folder, name);
  await writeFile(path, content);
  return path;
}

async function refusalOf(path: string): Promise<PictureError> {
  const error: unknown = await analysePicture({ path, ...none }).catch((reason: unknown) => reason);
  if (error instanceof PictureError) return error;
  throw new Error(`expected a refusal, got ${JSON.stringify(error)}`);
}

/** The picture's colour near a place, as fractions of its sides. */
async function colourNear(file: Buffer | string, x: number, y: number): Promise<number[]> {
  const { data, info } = await sharp(file).raw().toBuffer({ resolveWithObject: true });
  const i = (Math.floor(y * info.height) * info.width + Math.floor(x * info.width)) * info.channels;
  return [...data.subarray(i, i + 3)];
}

describe("analysePicture", () => {
  test.each([1, 2, 3, 4, 5, 6, 7, 8] as const)(
    "orientation %i: measurements, previews and crops are upright",
    async (orientation) => {
      const file = await storedScene(orientation).withMetadata({ orientation }).png().toBuffer();
      const path = await put(`turned-${orientation}.png`, file);
      const out = outputs(`turned-${orientation}`);
      const result = await analysePicture({ path, ...out });
      expect(result.metadata.orientation).toBe(orientation);
      expect(result.measurements).toMatchObject({ widthPx: WIDTH, heightPx: HEIGHT });
      const registration = await readRegistrationFile(out.registrationPath);
      expect([registration.widthPx, registration.heightPx]).toEqual([WIDTH / 2, HEIGHT / 2]);
      // Green grows downwards: the last row is bright, the first dark.
      expect(registration.data.at(-1)).toBeGreaterThan(60000);
      expect(registration.data[0]).toBeLessThan(2000);
      for (const made of [out.previewPath, out.thumbnailPath]) {
        expect(await sharp(made).metadata()).toMatchObject({ width: WIDTH, height: HEIGHT, format: "jpeg" });
        const [, , blue = 0] = await colourNear(made, 0.08, 0.08);
        const [, , elsewhere = 255] = await colourNear(made, 0.9, 0.9);
        expect(blue).toBeGreaterThan(200);
        expect(elsewhere).toBeLessThan(40);
      }
      const crop = await cropAtFullSize(path, orientation, { x: 60, y: 40, widthPx: 20, heightPx: 10 });
      expect(await sharp(crop).metadata()).toMatchObject({ width: 20, height: 10 });
      const [red = 0, green = 0] = await colourNear(crop, 0.5, 0.5);
      const [wantedRed = 0, wantedGreen = 0] = colourAt(70, 45);
      // JPEG quality 90: a few levels.
      expect(Math.abs(red - wantedRed)).toBeLessThan(8);
      expect(Math.abs(green - wantedGreen)).toBeLessThan(8);
    },
  );

  test("hashes the file as it is and says what it is", async () => {
    const file = await storedScene(1).jpeg().toBuffer();
    const path = await put("stored-under-a-generated-name", file);
    const result = await analysePicture({ path, name: "HARB0001.JPG", ...none });
    expect(result.sha256).toBe(createHash("sha256").update(file).digest("hex"));
    expect(result.bytes).toBe(file.length);
    expect(result.mediaType).toBe("image/jpeg");
    expect(await readFile(path)).toEqual(file);
  });

  test("grey, CMYK, transparent and 16-bit pictures are measured in the same levels", async () => {
    const grey = Buffer.from(Array.from({ length: 64 * 48 }, (_, i) => (i * 37) % 251));
    const raw = { raw: { width: 64, height: 48, channels: 1 as const } };
    const asGrey = await analysePicture({
      path: await put("grey.png", await sharp(grey, raw).png().toBuffer()),
      ...none,
    });
    const colour = await sharp(grey, raw).toColourspace("srgb").png().toBuffer();
    const asColour = await analysePicture({ path: await put("colour.png", colour), ...none });
    const deep = Buffer.alloc(64 * 48 * 3 * 2);
    for (let i = 0; i < 64 * 48 * 3; i += 1) deep.writeUInt16LE((grey[Math.floor(i / 3)] ?? 0) * 257, 2 * i);
    const deepRaw = new Uint16Array(deep.buffer, deep.byteOffset, deep.length / 2);
    const tiff = await sharp(deepRaw, { raw: { width: 64, height: 48, channels: 3 } })
      .toColourspace("rgb16")
      .tiff({ compression: "none" })
      .toBuffer();
    expect((await sharp(tiff).metadata()).depth).toBe("ushort");
    const asDeep = await analysePicture({ path: await put("deep.tif", tiff), ...none });
    const clear = await sharp(grey, raw).toColourspace("srgb").ensureAlpha(0.5).png().toBuffer();
    const asClear = await analysePicture({ path: await put("clear.png", clear), ...none });
    const expected = asGrey.measurements?.laplacianVariance ?? Number.NaN;
    for (const other of [asColour, asDeep, asClear]) {
      expect(other.measurements?.laplacianVariance).toBeCloseTo(expected, 6);
      expect(other.measurements?.meanBrightness).toBeCloseTo(asGrey.measurements?.meanBrightness ?? Number.NaN, 4);
    }
    const cmyk = await storedScene(1).toColourspace("cmyk").jpeg({ quality: 100 }).toBuffer();
    expect((await sharp(cmyk).metadata()).space).toBe("cmyk");
    const asCmyk = await analysePicture({ path: await put("cmyk.jpg", cmyk), ...none });
    expect(asCmyk.measurements?.meanBrightness).toBeGreaterThan(60);
  });

  test("previews carry no metadata of the original", async () => {
    const file = await storedScene(1)
      .withExif({ IFD0: { Make: "Harbour Optics" }, IFD2: { DateTimeOriginal: "2030:05:01 10:00:00" } })
      .jpeg()
      .toBuffer();
    const out = outputs("secret");
    const result = await analysePicture({ path: await put("secret.jpg", file), ...out });
    expect(result.metadata).toMatchObject({ make: "Harbour Optics", takenAt: { local: "2030-05-01T10:00:00" } });
    expect((await sharp(out.previewPath).metadata()).exif).toBeUndefined();
    expect((await readFile(out.previewPath)).includes("Harbour")).toBe(false);
  });

  // sharp writes no EXIF into TIFF; tests/reference has one that ExifTool wrote.
  test.each(["jpeg", "png", "webp"] as const)("EXIF is read from %s", async (format) => {
    const file = await storedScene(1)
      .withExif({
        IFD0: { Make: "Harbour Optics", Model: "H1" },
        IFD2: { DateTimeOriginal: "2030:05:01 10:00:00", SubSecTimeOriginal: "25", OffsetTimeOriginal: "+05:45" },
      })
      .toFormat(format)
      .toBuffer();
    const { metadata } = await analysePicture({ path: await put(`exif.${format}`, file), ...none });
    expect(metadata).toMatchObject({
      make: "Harbour Optics",
      model: "H1",
      takenAt: { local: "2030-05-01T10:00:00.25", offsetMinutes: 345 },
    });
  });

  test("of a TIFF with several pages the first counts", async () => {
    const page = (level: number) =>
      sharp({ create: { width: 20, height: 20, channels: 3, background: { r: level, g: level, b: level } } })
        .png()
        .toBuffer();
    const file = await sharp([await page(40), await page(200)], { join: { animated: true } })
      .tiff()
      .toBuffer();
    const result = await analysePicture({ path: await put("pages.tif", file), ...none });
    expect(result.measurements).toMatchObject({ widthPx: 20, heightPx: 20 });
    expect(result.measurements?.meanBrightness).toBeCloseTo(40, 4);
  });

  test("a raw file is hashed, not decoded", async () => {
    // An EXIF block after its mark is a TIFF structure, which is what most raw files are.
    const jpeg = await storedScene(1)
      .withExif({ IFD0: { Make: "Harbour Optics" } })
      .jpeg()
      .toBuffer();
    const tiff = Buffer.from((await sharp(jpeg).metadata()).exif?.subarray(6) ?? []);
    const result = await analysePicture({ path: await put("HARB0001.DNG", tiff), ...none });
    expect(result).toMatchObject({
      sha256: createHash("sha256").update(tiff).digest("hex"),
      mediaType: "image/x-raw-dng",
      measurements: null,
      metadata: { make: "Harbour Optics" },
    });
  });
});

describe("what cannot be read is refused in plain words, with its hash", () => {
  test("an empty file", async () => {
    const error = await refusalOf(await put("empty.jpg", ""));
    expect([error.code, error.file?.bytes]).toEqual(["empty", 0]);
    expect(error.reason).toContain("empty (0 bytes)");
    // FIPS 180-4: the hash of nothing.
    expect(error.file?.sha256).toBe("e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
  });

  test("text named .jpg", async () => {
    const error = await refusalOf(await put("letter.jpg", "abc"));
    expect(error.code).toBe("not-a-picture");
    expect(error.file?.sha256).toBe("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
  });

  test.each(["jpeg", "png", "webp", "tiff"] as const)("a %s that is cut short", async (format) => {
    const noise = Buffer.from(Array.from({ length: 200 * 200 * 3 }, (_, i) => (i * 7919) % 251));
    const whole = await sharp(noise, { raw: { width: 200, height: 200, channels: 3 } })
      .toFormat(format)
      .toBuffer();
    const error = await refusalOf(await put(`cut.${format}`, whole.subarray(0, Math.floor(whole.length * 0.6))));
    expect(["truncated", "damaged"]).toContain(error.code);
    expect(error.reason).toContain("Copy it from the card again");
    expect(error.file?.bytes).toBe(Math.floor(whole.length * 0.6));
  });

  test("a picture of 40 000 x 40 000 px in a few kilobytes", async () => {
    const error = await refusalOf(await put("bomb.png", pngHeaderOnly(40_000, 40_000)));
    expect(error.code).toBe("too-large");
    expect(error.reason).toContain("1600 megapixels");
  });

  test("a picture without an inner pixel", async () => {
    const dot = await sharp({ create: { width: 2, height: 9, channels: 3, background: "white" } })
      .png()
      .toBuffer();
    expect((await refusalOf(await put("dot.png", dot))).code).toBe("too-small");
  });

  test("a kind that is not decoded here is named", async () => {
    const gif = await sharp({ create: { width: 9, height: 9, channels: 3, background: "white" } })
      .gif()
      .toBuffer();
    const error = await refusalOf(await put("nine.gif", gif));
    expect([error.code, error.reason.slice(0, 12)]).toEqual(["unsupported", "GIF pictures"]);
  });

  test("nothing half-written is left behind", async () => {
    expect((await readdir(join(folder, "out"))).filter((name) => name.endsWith(".part"))).toEqual([]);
  });
});

/** A PNG whose header promises this size, with rows of zeros that never come to it. */
function pngHeaderOnly(widthPx: number, heightPx: number): Buffer {
  const chunk = (type: string, body: Buffer) => {
    const typed = Buffer.concat([Buffer.from(type, "latin1"), body]);
    const length = Buffer.alloc(4);
    length.writeUInt32BE(body.length);
    const check = Buffer.alloc(4);
    check.writeUInt32BE(crc32(typed));
    return Buffer.concat([length, typed, check]);
  };
  const header = Buffer.alloc(13);
  header.writeUInt32BE(widthPx, 0);
  header.writeUInt32BE(heightPx, 4);
  header.set([8, 2, 0, 0, 0], 8);
  const mark = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
  const rows = deflateSync(Buffer.alloc(2_000_000));
  return Buffer.concat([mark, chunk("IHDR", header), chunk("IDAT", rows), chunk("IEND", Buffer.alloc(0))]);
}

/** PNG's check sum (ISO 3309), bit by bit. */
function crc32(data: Buffer): number {
  let crc = 0xffffffff;
  for (const byte of data) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit += 1) crc = (crc >>> 1) ^ (crc & 1 ? 0xedb88320 : 0);
  }
  return (crc ^ 0xffffffff) >>> 0;
}
