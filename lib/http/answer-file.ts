import { type ByteRange, readByteRange } from "@/lib/http/byte-range";

/** A stored file as it is to be sent. */
export interface FileAnswer {
  readonly sizeBytes: number;
  /** Hex; null where it is not known yet. */
  readonly sha256: string | null;
  readonly mediaType: string;
  /** `Content-Disposition`. */
  readonly disposition: string;
  /** Bytes `first` to `last`, a piece at a time. */
  readonly open: (range: ByteRange) => ReadableStream<Uint8Array>;
}

/**
 * A file, or the part of it that `Range` asks for; HEAD and 304 without a body.
 * Source: RFC 9110: 8.8.3 (ETag), 13.1.2 (If-None-Match), 13.1.5 (If-Range), 14 (Range, 206, 416).
 */
export function answerFile(request: Request, file: FileAnswer): Response {
  const { sizeBytes, sha256 } = file;
  const etag = sha256 === null ? null : `"${sha256}"`;
  const headers = new Headers({
    "accept-ranges": "bytes",
    // no-transform: compressed on the way, its length and its parts would be wrong.
    "cache-control": "private, no-cache, no-transform",
    "content-disposition": file.disposition,
    "content-type": file.mediaType,
  });
  if (etag !== null) headers.set("etag", etag);
  if (etag !== null && isKnown(request, etag)) return new Response(null, { status: 304, headers });
  const range = mayBePart(request, etag) ? readByteRange(request.headers.get("range"), sizeBytes) : null;
  if (range === "unsatisfiable") {
    headers.set("content-range", `bytes */${sizeBytes}`);
    headers.delete("content-disposition");
    headers.delete("content-type");
    return new Response(null, { status: 416, headers });
  }
  const { first, last } = range ?? { first: 0, last: sizeBytes - 1 };
  // Next leaves it out when it sends (its send-response.js); a download then shows no total, `content-range` does.
  headers.set("content-length", String(last - first + 1));
  if (range) headers.set("content-range", `bytes ${first}-${last}/${sizeBytes}`);
  const isEmpty = request.method === "HEAD" || sizeBytes === 0;
  return new Response(isEmpty ? null : file.open({ first, last }), { status: range ? 206 : 200, headers });
}

function isKnown(request: Request, etag: string): boolean {
  const asked = request.headers.get("if-none-match");
  if (asked === null) return false;
  return asked.trim() === "*" || asked.split(",").some((one) => one.trim().replace(/^W\//, "") === etag);
}

/** Range is of GET only, and void where `If-Range` names another state of the file: by a strong ETag, not by a date. */
function mayBePart(request: Request, etag: string | null): boolean {
  if (request.method !== "GET") return false;
  const condition = request.headers.get("if-range");
  return condition === null || condition.trim() === etag;
}
