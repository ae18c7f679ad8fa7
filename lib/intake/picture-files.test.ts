import { describe, expect, test } from "vitest";

import { extensionOf, identifyPicture, isPictureFile, stemOf } from "@/lib/intake/picture-files";

const bytes = (...values: number[]) => Uint8Array.from(values);
const text = (value: string) => Uint8Array.from(value, (letter) => letter.charCodeAt(0));
const JPEG = bytes(0xff, 0xd8, 0xff, 0xe1);
const TIFF = bytes(0x49, 0x49, 0x2a, 0x00, 8, 0, 0, 0);
const NOTHING = bytes();

describe("identifyPicture", () => {
  test.each([
    ["HARB0001.JPG", JPEG, { kind: "decodable", mediaType: "image/jpeg" }],
    ["no extension", JPEG, { kind: "decodable", mediaType: "image/jpeg" }],
    ["wrong.png", JPEG, { kind: "decodable", mediaType: "image/jpeg" }],
    ["a.tif", TIFF, { kind: "decodable", mediaType: "image/tiff" }],
    ["a.tif", bytes(0x4d, 0x4d, 0x00, 0x2a), { kind: "decodable", mediaType: "image/tiff" }],
    ["a.png", bytes(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a), { kind: "decodable", mediaType: "image/png" }],
    ["a.webp", text("RIFF\x10\0\0\0WEBPVP8 "), { kind: "decodable", mediaType: "image/webp" }],
    ["HARB0001.DNG", TIFF, { kind: "raw", mediaType: "image/x-raw-dng" }],
    ["HARB0001.Arw", TIFF, { kind: "raw", mediaType: "image/x-raw-arw" }],
    ["a.raf", text("FUJIFILMCCD-RAW "), { kind: "raw", mediaType: "image/x-raw-raf" }],
    ["a.tif", text("IIRO\x08\0\0\0"), { kind: "raw", mediaType: "image/x-raw" }],
    ["a.heic", text("\0\0\0\x18ftypheic"), { kind: "unsupported", format: "HEIC" }],
    ["a.jpg", text("\0\0\0\x18ftypavif"), { kind: "unsupported", format: "AVIF" }],
    ["a.bmp", text("BM"), { kind: "unsupported", format: "BMP" }],
    ["a.jpg", text("Dear diary"), { kind: "misnamed" }],
    ["a.jpg", NOTHING, { kind: "misnamed" }],
    ["notes.txt", text("Dear diary"), { kind: "other" }],
    ["", NOTHING, { kind: "other" }],
  ])("%s is told by content first, name second", (name, head, expected) => {
    expect(identifyPicture(name, head)).toEqual(expected);
  });
});

describe("isPictureFile", () => {
  test.each([
    ["a.JPEG", NOTHING, true],
    ["a.CR3", NOTHING, true],
    ["without extension", JPEG, true],
    ["notes.txt", text("Dear diary"), false],
    [".hidden.jpg", JPEG, false],
    ["folder/._a.jpg", JPEG, false],
    ["jpg", NOTHING, false],
  ])("%s", (name, head, expected) => {
    expect(isPictureFile(name, head)).toBe(expected);
  });

  test("stem and extension of odd names", () => {
    expect([stemOf("x/a.b.JPG"), extensionOf("x/a.b.JPG")]).toEqual(["a.b", "jpg"]);
    expect([stemOf("a"), extensionOf("a")]).toEqual(["a", ""]);
    expect([stemOf(".jpg"), extensionOf(".jpg")]).toEqual([".jpg", ""]);
    expect([stemOf("folder.d/a"), extensionOf("folder.d/a")]).toEqual(["a", ""]);
  });
});
