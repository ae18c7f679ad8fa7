import exifr from "exifr";

import { parseTakenAt } from "@/lib/metadata/taken-at";
import type { CaptureMetadata, Orientation } from "@/lib/metadata/types";

/** Metadata of a picture that says nothing of how it was taken. */
export const NO_METADATA: CaptureMetadata = {
  takenAt: null,
  make: null,
  model: null,
  serial: null,
  lens: null,
  exposureSeconds: null,
  aperture: null,
  iso: null,
  focalLengthMm: null,
  orientation: 1,
};

/** Texts longer than this are damage, not names; they would only spoil lists. Characters. */
const LONGEST_TEXT = 200;

/** Tags by number, not name: names are a library's own. Exif 2.32 and TIFF 6.0. */
const TAGS = {
  make: 0x010f,
  model: 0x0110,
  orientation: 0x0112,
  exposureTime: 0x829a,
  fNumber: 0x829d,
  sensitivity: 0x8827,
  shutterSpeedValue: 0x9201,
  apertureValue: 0x9202,
  focalLength: 0x920a,
  recommendedExposureIndex: 0x8832,
  dateTimeOriginal: 0x9003,
  dateTimeDigitized: 0x9004,
  subSecTimeOriginal: 0x9291,
  subSecTimeDigitized: 0x9292,
  offsetTimeOriginal: 0x9011,
  offsetTimeDigitized: 0x9012,
  bodySerialNumber: 0xa431,
  lensModel: 0xa434,
} as const;

/** Sensitivities from here on do not fit the 16 bits of the tag; the true one stands elsewhere (Exif 2.3). */
const SENSITIVITY_OVERFLOW = 65535;

type Tags = ReadonlyMap<number, unknown>;

/**
 * What a picture file says of how it was taken. Never throws: what cannot be read is null, orientation 1.
 * @param file - the whole file, or as much as holds its metadata; JPEG, TIFF, PNG, or a raw file that is TIFF inside
 * @param exifBlock - the EXIF block alone where somebody else has found it (WebP, which exifr cannot open)
 */
export async function readMetadata(file: Buffer, exifBlock: Buffer | null = null): Promise<CaptureMetadata> {
  const tags = (await parseTags(file)) ?? (exifBlock && (await parseTags(stripExifMark(exifBlock))));
  return tags ? toMetadata(tags) : NO_METADATA;
}

/** A JPEG's EXIF segment begins with "Exif\0\0"; the TIFF structure that exifr takes comes after it. */
function stripExifMark(block: Buffer): Buffer {
  return block.toString("latin1", 0, 4) === "Exif" ? block.subarray(6) : block;
}

async function parseTags(file: Buffer): Promise<Tags | null> {
  try {
    const found: unknown = await exifr.parse(file, {
      tiff: true,
      ifd0: {},
      exif: true,
      gps: false,
      interop: false,
      ifd1: false,
      xmp: false,
      icc: false,
      iptc: false,
      jfif: false,
      makerNote: false,
      userComment: false,
      mergeOutput: false,
      translateKeys: false,
      translateValues: false,
      // Reviving would read camera times in this machine's time zone and drop the offset.
      reviveValues: false,
      sanitize: true,
    });
    return collectTags(found);
  } catch {
    // Damaged metadata is common and says nothing of the picture itself: it counts as none.
    return null;
  }
}

function collectTags(found: unknown): Tags | null {
  if (typeof found !== "object" || found === null) return null;
  const blocks = found as { ifd0?: unknown; exif?: unknown };
  const tags = new Map<number, unknown>();
  for (const block of [blocks.ifd0, blocks.exif]) {
    if (typeof block !== "object" || block === null) continue;
    for (const [key, value] of Object.entries(block)) tags.set(Number(key), value);
  }
  return tags.size > 0 ? tags : null;
}

function toMetadata(tags: Tags): CaptureMetadata {
  const text = (tag: number) => readText(tags.get(tag));
  const positive = (tag: number) => readPositive(tags.get(tag));
  return {
    takenAt:
      parseTakenAt({
        dateTime: text(TAGS.dateTimeOriginal),
        subSecond: text(TAGS.subSecTimeOriginal),
        offset: text(TAGS.offsetTimeOriginal),
      }) ??
      parseTakenAt({
        dateTime: text(TAGS.dateTimeDigitized),
        subSecond: text(TAGS.subSecTimeDigitized),
        offset: text(TAGS.offsetTimeDigitized),
      }),
    make: text(TAGS.make),
    model: text(TAGS.model),
    serial: text(TAGS.bodySerialNumber),
    lens: text(TAGS.lensModel),
    exposureSeconds: positive(TAGS.exposureTime) ?? fromApex(tags.get(TAGS.shutterSpeedValue), (value) => 2 ** -value),
    aperture: positive(TAGS.fNumber) ?? fromApex(tags.get(TAGS.apertureValue), (value) => 2 ** (value / 2)),
    iso: readSensitivity(tags),
    focalLengthMm: positive(TAGS.focalLength),
    orientation: readOrientation(tags.get(TAGS.orientation)),
  };
}

/** Valid orientations as they are, everything else upright. */
export function readOrientation(value: unknown): Orientation {
  const orientation = firstOf(value);
  return isOrientation(orientation) ? orientation : 1;
}

function isOrientation(value: unknown): value is Orientation {
  return typeof value === "number" && Number.isInteger(value) && value >= 1 && value <= 8;
}

function readSensitivity(tags: Tags): number | null {
  const sensitivity = readPositive(tags.get(TAGS.sensitivity));
  if (sensitivity !== null && sensitivity < SENSITIVITY_OVERFLOW) return sensitivity;
  return readPositive(tags.get(TAGS.recommendedExposureIndex)) ?? sensitivity;
}

function fromApex(value: unknown, convert: (value: number) => number): number | null {
  const number = firstOf(value);
  return typeof number === "number" && Number.isFinite(number) ? readPositive(convert(number)) : null;
}

function firstOf(value: unknown): unknown {
  return Array.isArray(value) || ArrayBuffer.isView(value) ? Object.values(value)[0] : value;
}

function readPositive(value: unknown): number | null {
  const number = firstOf(value);
  return typeof number === "number" && Number.isFinite(number) && number > 0 ? number : null;
}

/** Text without padding; control characters end it, as a NUL does in C. */
function readText(value: unknown): string | null {
  const raw = typeof value === "number" ? String(value) : value;
  if (typeof raw !== "string") return null;
  // eslint-disable-next-line no-control-regex -- control characters are what is looked for
  const text = (raw.split(/[\u0000-\u001f\u007f]/, 1)[0] ?? "").trim();
  return text === "" || text.length > LONGEST_TEXT ? null : text;
}
