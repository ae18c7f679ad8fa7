/** Bytes of a whole, both ends included. */
export interface ByteRange {
  readonly first: number;
  readonly last: number;
}

/**
 * What part of a whole a `Range` header asks for.
 * @param sizeBytes - of the whole
 * @returns null: all of it (no header, another unit, several ranges, not understood: all may be ignored);
 *   "unsatisfiable": none of it is there, 416
 * Source: RFC 9110, 14.1.1, 14.1.2 and 14.2.
 */
export function readByteRange(header: string | null, sizeBytes: number): ByteRange | "unsatisfiable" | null {
  const found = /^bytes=[ \t]*(\d*)-(\d*)[ \t]*$/i.exec(header ?? "");
  const [from = "", to = ""] = found?.slice(1) ?? [];
  if (from === "" && to === "") return null;
  if (from === "") {
    const count = Math.min(Number(to), sizeBytes);
    return count === 0 ? "unsatisfiable" : { first: sizeBytes - count, last: sizeBytes - 1 };
  }
  const first = Number(from);
  const last = to === "" ? Infinity : Number(to);
  if (last < first) return null;
  return first >= sizeBytes ? "unsatisfiable" : { first, last: Math.min(last, sizeBytes - 1) };
}
