import "server-only";
import { MemoryLocker, Server } from "@tus/server";
import { AppError, type ErrorCode } from "@/lib/errors/app-error";
import { uploadIdSchema } from "@/lib/ids";
import { finishUpload } from "@/lib/intake/finish";
import { OriginalStore } from "@/lib/intake/original-store";
import { createUpload, type NewUpload } from "@/lib/intake/writes";
import { requireSpace } from "@/lib/storage/disk";

export const UPLOADS_PATH = "/api/uploads";

/** Largest file taken, bytes: what a 32-bit TIFF can hold (4 GiB); no camera's frame comes near it. */
export const UPLOAD_MOST_BYTES = 4 * 1024 ** 3;

type Creation = Omit<NewUpload, "lengthBytes">;

/** Facts of a request that the server's hooks need, and the failure that they met. */
const creations = new WeakMap<object, Creation>();
const failures = new WeakMap<object, unknown>();

// Next loads server modules more than once: one set of locks a process all the same.
const holder: { stackyardUploads?: Server } = globalThis as object;

function server(): Server {
  holder.stackyardUploads ??= new Server({
    path: UPLOADS_PATH,
    datastore: new OriginalStore(),
    locker: new MemoryLocker(),
    maxSize: UPLOAD_MOST_BYTES,
    relativeLocation: true,
    // Without it the last part of the whole address counts, query and all: not what the gate has looked at.
    getFileIdFromRequest: (request) => new URL(request.url).pathname.split("/").at(-1),
    namingFunction: (request) => creationOf(request).id,
    onUploadCreate: async (request, upload) => {
      const lengthBytes = upload.size ?? 0;
      await requireSpace(lengthBytes);
      await createUpload({ ...creationOf(request), lengthBytes }, Date.now());
      return {};
    },
    onUploadFinish: async (_request, upload) => {
      await finishUpload(uploadIdSchema.parse(upload.id));
      return {};
    },
    onResponseError: (request, error) => {
      failures.set(request, error);
      return undefined;
    },
  });
  return holder.stackyardUploads;
}

/**
 * Lets the tus server answer a request that the gate has let through.
 * @throws AppError where it refuses; what the hooks threw
 */
export async function answerByTus(request: Request, creation?: Creation): Promise<Response> {
  if (creation) creations.set(request, creation);
  const response = await server().handleWeb(request);
  const failure = failures.get(request);
  if (failure instanceof Error && !("status_code" in failure)) throw failure;
  if (response.status >= 400) throw refusal(response.status, (await response.text()).trim());
  return response;
}

function creationOf(request: object): Creation {
  const creation = creations.get(request);
  if (!creation) throw new Error("an upload is created only through the route");
  return creation;
}

/** The tus server's statuses as failures of ours. */
const CODES: Readonly<Record<number, ErrorCode>> = {
  403: "invalid",
  404: "not_found",
  409: "conflict",
  410: "gone",
  412: "precondition_failed",
  413: "too_large",
  501: "not_supported",
};

const MESSAGES: Partial<Record<ErrorCode, string>> = {
  not_found: "There is no such upload, or it is not yours.",
  gone: "The bytes of this upload are no longer here. Bring the file in again.",
  conflict: "Upload-Offset is not where this upload stands. Ask with HEAD and go on from there.",
  too_large: `This is more than was announced, or more than one file may have (${UPLOAD_MOST_BYTES} bytes).`,
};

function refusal(status: number, words: string): Error {
  if (status >= 500 && status !== 501) return new Error(`tus server: ${words}`);
  const code = CODES[status] ?? "invalid";
  return new AppError(code, MESSAGES[code] ?? `${words}.`);
}

type RouteHandler = (request: Request, context: { params: Promise<unknown> }) => Promise<Response>;

/**
 * Puts the protocol's headers on every answer, refusals too (tus 1.0.0, Tus-Resumable, Tus-Version, Tus-Max-Size), and
 * takes the tus server's CORS headers off: other sites' pages have no business here.
 */
export function withTusHeaders(handle: RouteHandler): RouteHandler {
  return async (request, context) => {
    const answer = await handle(request, context);
    const headers = new Headers(answer.headers);
    for (const name of [...headers.keys()]) if (name.startsWith("access-control-")) headers.delete(name);
    headers.set("tus-resumable", "1.0.0");
    headers.set("tus-version", "1.0.0");
    headers.set("tus-max-size", String(UPLOAD_MOST_BYTES));
    headers.set("cache-control", "no-store");
    return new Response(answer.body, { status: answer.status, headers });
  };
}
