import { readFile } from "node:fs/promises";

import { REGISTRATION_LONG_SIDE_PX } from "@/lib/analysis/registration-image";
import type { RegistrationImage } from "@/lib/analysis/types";

/** Marks the file and its version; then width and height, 16 bits each, then the levels; all little-endian. */
const MARK = "SYR1";
const HEADER_BYTES = 8;

/** A registration image as the bytes of its file. */
export function encodeRegistration(image: RegistrationImage): Buffer {
  const file = Buffer.alloc(HEADER_BYTES + 2 * image.data.length);
  file.write(MARK, 0, "latin1");
  file.writeUInt16LE(image.widthPx, 4);
  file.writeUInt16LE(image.heightPx, 6);
  image.data.forEach((level, i) => file.writeUInt16LE(level, HEADER_BYTES + 2 * i));
  return file;
}

/** @throws Error when the bytes are not a whole registration file */
export function decodeRegistration(file: Buffer): RegistrationImage {
  const isWhole = file.length >= HEADER_BYTES && file.toString("latin1", 0, 4) === MARK;
  const widthPx = isWhole ? file.readUInt16LE(4) : 0;
  const heightPx = isWhole ? file.readUInt16LE(6) : 0;
  const levels = widthPx * heightPx;
  if (
    levels === 0 ||
    Math.max(widthPx, heightPx) > REGISTRATION_LONG_SIDE_PX ||
    file.length !== HEADER_BYTES + 2 * levels
  ) {
    throw new Error(`not a registration image: ${file.length} bytes, ${widthPx} x ${heightPx} px`);
  }
  const data = new Uint16Array(levels);
  for (let i = 0; i < levels; i += 1) data[i] = file.readUInt16LE(HEADER_BYTES + 2 * i);
  return { data, widthPx, heightPx };
}

export async function readRegistrationFile(path: string): Promise<RegistrationImage> {
  return decodeRegistration(await readFile(path));
}
