import { createHash } from "node:crypto";

/** A JSON answer about what may change at any moment: nobody keeps it. */
export function answerJson(body: unknown): Response {
  return Response.json(body, { headers: { "cache-control": "no-store" } });
}

/** A JSON answer that the browser keeps and asks about: 304 without a body where it is still the same (RFC 9110, 13.1.2). */
export function answerJsonUnlessSame(request: Request, body: unknown): Response {
  const text = JSON.stringify(body);
  const etag = `"${createHash("sha256").update(text).digest("base64url")}"`;
  const headers = { etag, "cache-control": "private, no-cache", "content-type": "application/json" };
  if (hasEtag(request, etag)) return new Response(null, { status: 304, headers });
  return new Response(text, { headers });
}

/** A year, the longest that caches heed: what is under the address never changes. */
const IMMUTABLE = "private, max-age=31536000, immutable";

/**
 * A picture that never changes under its address. Kept by the person's own browser only.
 * @param read - makes the bytes where the browser has not got them
 */
export async function answerPicture(
  request: Request,
  name: string,
  read: () => Promise<Uint8Array>,
): Promise<Response> {
  const etag = `"${name}"`;
  const headers = { etag, "cache-control": IMMUTABLE, "content-type": "image/jpeg" };
  if (hasEtag(request, etag)) return new Response(null, { status: 304, headers });
  return new Response(new Uint8Array(await read()), { headers });
}

function hasEtag(request: Request, etag: string): boolean {
  const asked = request.headers.get("if-none-match");
  return asked !== null && asked.split(",").some((one) => one.trim().replace(/^W\//, "") === etag);
}
