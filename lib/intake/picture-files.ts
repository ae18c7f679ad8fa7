/** What a file is, from its name and its first bytes. */
export type PictureIdentity =
  /** Can be decoded and measured. */
  | { readonly kind: "decodable"; readonly mediaType: string }
  /** A raw file: stored and hashed, not decoded. */
  | { readonly kind: "raw"; readonly mediaType: string }
  /** A picture of a kind that is not read here; `format` is what to call it. */
  | { readonly kind: "unsupported"; readonly format: string }
  /** Named like a picture, but its content is none. */
  | { readonly kind: "misnamed" }
  /** Not a picture at all. */
  | { readonly kind: "other" };

/** As many first bytes as `identifyPicture` looks at. */
export const HEAD_BYTES = 32;

const DECODABLE_EXTENSIONS = new Set(["jpg", "jpeg", "jpe", "jfif", "tif", "tiff", "png", "webp"]);

/** Extensions under which cameras and converters write raw files; most are TIFF inside, so the name must decide. */
const RAW_EXTENSIONS = new Set(
  (
    "3fr arw bay cap cr2 cr3 crw dcr dcs dng drf eip erf fff gpr iiq k25 kdc mdc mef mos mrw nef nrw orf pef ptx " +
    "pxn raf raw rw2 rwl rwz sr2 srf srw x3f"
  ).split(" "),
);

/** Other picture extensions and what to call the format. */
const UNSUPPORTED_EXTENSIONS = new Map([
  ["heic", "HEIC"],
  ["heif", "HEIF"],
  ["hif", "HEIF"],
  ["avif", "AVIF"],
  ["gif", "GIF"],
  ["bmp", "BMP"],
  ["dib", "BMP"],
  ["jp2", "JPEG 2000"],
  ["j2k", "JPEG 2000"],
  ["j2c", "JPEG 2000"],
  ["jpx", "JPEG 2000"],
  ["jxl", "JPEG XL"],
  ["jxr", "JPEG XR"],
  ["psd", "Layered (PSD)"],
  ["psb", "Layered (PSB)"],
  ["tga", "TGA"],
  ["ico", "Icon"],
  ["icns", "Icon"],
  ["exr", "OpenEXR"],
  ["hdr", "Radiance HDR"],
  ["dds", "DDS"],
  ["pcx", "PCX"],
  ["sgi", "SGI"],
  ["ppm", "PPM"],
  ["pgm", "PGM"],
  ["pbm", "PBM"],
  ["pnm", "PNM"],
  ["svg", "SVG"],
]);

type Signature =
  | { readonly kind: "decodable"; readonly mediaType: string }
  | { readonly kind: "raw" }
  | { readonly kind: "unsupported"; readonly format: string };

/**
 * Tells what a file is. The content decides where it can; the name decides between raw files and TIFF, which share
 * a signature, and whether something unknown calls itself a picture.
 * @param name - the file's own name, any case; a folder before it is ignored
 * @param head - its first bytes, HEAD_BYTES or all there are
 */
export function identifyPicture(name: string, head: Uint8Array): PictureIdentity {
  const extension = extensionOf(name);
  const isRawName = RAW_EXTENSIONS.has(extension);
  const signature = readSignature(head);
  const isPlainTiff = signature?.kind === "decodable" && signature.mediaType === "image/tiff";
  if (signature?.kind === "raw" || (isRawName && (signature === null || isPlainTiff))) {
    return { kind: "raw", mediaType: isRawName ? `image/x-raw-${extension}` : "image/x-raw" };
  }
  if (signature?.kind === "decodable" || signature?.kind === "unsupported") return signature;
  const format = UNSUPPORTED_EXTENSIONS.get(extension);
  if (format !== undefined) return { kind: "unsupported", format };
  return DECODABLE_EXTENSIONS.has(extension) ? { kind: "misnamed" } : { kind: "other" };
}

/** Whether intake takes the file: a known picture extension in any case, or a picture's signature; never a hidden file. */
export function isPictureFile(name: string, head: Uint8Array): boolean {
  return !isHiddenName(name) && (hasPictureExtension(name) || readSignature(head) !== null);
}

/** Whether the name alone says picture, as far as a browser can tell before reading. */
export function hasPictureExtension(name: string): boolean {
  const extension = extensionOf(name);
  return DECODABLE_EXTENSIONS.has(extension) || RAW_EXTENSIONS.has(extension) || UNSUPPORTED_EXTENSIONS.has(extension);
}

/** Whether the name is one of a raw file. */
export function hasRawExtension(name: string): boolean {
  return RAW_EXTENSIONS.has(extensionOf(name));
}

export function isHiddenName(name: string): boolean {
  return baseName(name).startsWith(".");
}

/** File name without folder and extension; a name that is all extension (".jpg") is its own stem. */
export function stemOf(name: string): string {
  const base = baseName(name);
  const dot = base.lastIndexOf(".");
  return dot > 0 ? base.slice(0, dot) : base;
}

/** Lower-case extension without the dot, "" where there is none. */
export function extensionOf(name: string): string {
  const base = baseName(name);
  const dot = base.lastIndexOf(".");
  return dot > 0 ? base.slice(dot + 1).toLowerCase() : "";
}

function baseName(name: string): string {
  return name.slice(name.lastIndexOf("/") + 1);
}

/** From memory of the formats' own specifications; checked in tests against files that other programs wrote. */
function readSignature(head: Uint8Array): Signature | null {
  if (startsWith(head, [0xff, 0xd8, 0xff])) return { kind: "decodable", mediaType: "image/jpeg" };
  if (startsWith(head, [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])) {
    return { kind: "decodable", mediaType: "image/png" };
  }
  if (textAt(head, 0, "RIFF") && textAt(head, 8, "WEBP")) return { kind: "decodable", mediaType: "image/webp" };
  if (startsWith(head, [0x49, 0x49, 0x2a, 0x00]) && textAt(head, 8, "CR")) return { kind: "raw" };
  const tiffStarts = [
    [0x49, 0x49, 0x2a, 0x00],
    [0x4d, 0x4d, 0x00, 0x2a],
    [0x49, 0x49, 0x2b, 0x00],
    [0x4d, 0x4d, 0x00, 0x2b],
  ];
  if (tiffStarts.some((bytes) => startsWith(head, bytes))) return { kind: "decodable", mediaType: "image/tiff" };
  return isRawSignature(head) ? { kind: "raw" } : readUnsupportedSignature(head);
}

function isRawSignature(head: Uint8Array): boolean {
  const texts = ["IIRO", "IIRS", "MMOR", "IIU\0", "FUJIFILMCCD-RAW", "FOVb", "\0MRM"];
  return texts.some((text) => textAt(head, 0, text)) || textAt(head, 4, "ftypcrx");
}

function readUnsupportedSignature(head: Uint8Array): Signature | null {
  const format = UNSUPPORTED_SIGNATURES.find(([at, text]) => textAt(head, at, text))?.[2];
  return format === undefined ? null : { kind: "unsupported", format };
}

const UNSUPPORTED_SIGNATURES: readonly (readonly [at: number, text: string, format: string])[] = [
  [4, "ftypavif", "AVIF"],
  [4, "ftypavis", "AVIF"],
  [4, "ftyphei", "HEIC"],
  [4, "ftyphev", "HEIC"],
  [4, "ftypmif1", "HEIF"],
  [4, "ftypmsf1", "HEIF"],
  [4, "jP  \r\n", "JPEG 2000"],
  [0, "\xff\x4f\xff\x51", "JPEG 2000"],
  [4, "JXL \r\n", "JPEG XL"],
  [0, "GIF87a", "GIF"],
  [0, "GIF89a", "GIF"],
  [0, "8BPS", "Layered (PSD)"],
  [0, "v/1\x01", "OpenEXR"],
];

function startsWith(head: Uint8Array, bytes: readonly number[]): boolean {
  return bytes.every((byte, i) => head[i] === byte);
}

function textAt(head: Uint8Array, at: number, text: string): boolean {
  return [...text].every((letter, i) => head[at + i] === letter.charCodeAt(0));
}
