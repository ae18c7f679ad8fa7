import { DELETE, HEAD, OPTIONS, PATCH, POST } from "@/app/api/uploads/[[...path]]/route";

// Requests as a tus client sends them, straight to the route handlers.
const ORIGIN = "http://localhost:3000";
const PROTOCOL = { "tus-resumable": "1.0.0" };

export type SentHeaders = Readonly<Record<string, string>>;

/** tus 1.0.0, Creation, Upload-Metadata: key, a space, base64 of UTF-8. */
export function tusMetadata(values: Readonly<Record<string, string>>): string {
  return Object.entries(values)
    .map(([key, value]) => `${key} ${Buffer.from(value).toString("base64")}`)
    .join(",");
}

export function createUpload(
  metadata: Readonly<Record<string, string>>,
  lengthBytes: number,
  headers: SentHeaders = {},
  body?: Uint8Array,
): Promise<Response> {
  const all = {
    ...PROTOCOL,
    "upload-length": String(lengthBytes),
    "upload-metadata": tusMetadata(metadata),
    ...(body ? { "content-type": "application/offset+octet-stream", "content-length": String(body.byteLength) } : {}),
    ...headers,
  };
  return POST(new Request(`${ORIGIN}/api/uploads`, { method: "POST", headers: all, ...bodyOf(body) }), contextOf());
}

export function patchUpload(
  location: string,
  bytes: Uint8Array,
  offset: number,
  headers: SentHeaders = {},
): Promise<Response> {
  const all = {
    ...PROTOCOL,
    "content-type": "application/offset+octet-stream",
    "content-length": String(bytes.byteLength),
    "upload-offset": String(offset),
    ...headers,
  };
  const request = new Request(`${ORIGIN}${location}`, { method: "PATCH", headers: all, ...bodyOf(bytes) });
  return PATCH(request, contextOf(location));
}

export function headUpload(location: string, headers: SentHeaders = {}): Promise<Response> {
  const request = new Request(`${ORIGIN}${location}`, { method: "HEAD", headers: { ...PROTOCOL, ...headers } });
  return HEAD(request, contextOf(location));
}

export function deleteUpload(location: string, headers: SentHeaders = {}): Promise<Response> {
  const request = new Request(`${ORIGIN}${location}`, { method: "DELETE", headers: { ...PROTOCOL, ...headers } });
  return DELETE(request, contextOf(location));
}

export function askProtocol(): Promise<Response> {
  return OPTIONS(new Request(`${ORIGIN}/api/uploads`, { method: "OPTIONS" }), contextOf());
}

/** A whole file in one go. @returns its upload id */
export async function uploadFile(projectId: string, name: string, bytes: Uint8Array, folder = ""): Promise<string> {
  const created = await createUpload({ projectId, filename: name, folder }, bytes.byteLength);
  if (created.status !== 201) throw new Error(`not created: ${created.status} ${await created.text()}`);
  const location = created.headers.get("location") ?? "";
  if (bytes.byteLength > 0) {
    const sent = await patchUpload(location, bytes, 0);
    if (sent.status !== 204) throw new Error(`not taken: ${sent.status} ${await sent.text()}`);
  }
  return idOf(location);
}

export function idOf(location: string): string {
  return location.slice(location.lastIndexOf("/") + 1);
}

function contextOf(location?: string) {
  return { params: Promise.resolve(location === undefined ? {} : { path: [idOf(location)] }) };
}

function bodyOf(bytes: Uint8Array | undefined): RequestInit {
  return bytes && bytes.byteLength > 0 ? { body: new Uint8Array(bytes) } : {};
}
