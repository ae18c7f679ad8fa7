import { DetailedError, Upload } from "tus-js-client";
import type { MakeTransfer, OutgoingFile, TransferFailure } from "@/lib/uploads/upload-queue";

const ENDPOINT = "/api/uploads";
/** Long enough to be quick, short enough that a break costs little to repeat. */
const CHUNK_BYTES = 8 * 1024 * 1024;
/** Short stumbles are got over without a word; what lasts longer is told. */
const RETRY_DELAYS_MS = [500, 1500, 4000];

/** Sends files by tus 1.0.0 to a project. */
export function tusTransfers(projectId: string): MakeTransfer {
  return (file, events) => {
    const upload = new Upload(file.content, {
      endpoint: ENDPOINT,
      uploadUrl: file.uploadUrl,
      metadata: uploadMetadata(projectId, file),
      chunkSize: CHUNK_BYTES,
      retryDelays: RETRY_DELAYS_MS,
      // What is unfinished is known to the server and matched by name, folder, size and time: one list, not two.
      storeFingerprintForResuming: false,
      onShouldRetry: (error) => isWorthRetrying(statusOf(error)),
      onProgress: (sentBytes) => events.onProgress(sentBytes),
      onSuccess: () => events.onDone(),
      onError: (error) => events.onFailure(describeFailure(error)),
    });
    return {
      start: () => upload.start(),
      pause: () => void upload.abort(false).catch(() => undefined),
      // Where the server cannot be told, the unfinished upload stays listed and can be cancelled there.
      cancel: () => void upload.abort(true).catch(() => undefined),
    };
  };
}

/** The metadata that `POST /api/uploads` asks for (interfaces.md, HTTP). */
export function uploadMetadata(projectId: string, file: OutgoingFile): Record<string, string> {
  return {
    projectId,
    filename: file.name,
    folder: file.folder,
    lastModified: String(Math.round(file.lastModifiedMs)),
  };
}

/** Tells what stopped an upload from the answer's status and its problem body (RFC 9457). */
export function describeFailure(error: Error): TransferFailure {
  const status = statusOf(error);
  const detail = detailOf(error);
  if (status === 401) return { kind: "signed-out" };
  if (status === 507) return { kind: "full", message: detail ?? "The server has no room left for new files." };
  if (status === 0 || status >= 500) return { kind: "no-answer" };
  return { kind: "refused", message: detail ?? `The server refused it (${status}).` };
}

function isWorthRetrying(status: number): boolean {
  return status === 0 || status === 409 || status === 423 || status === 429 || (status >= 500 && status !== 507);
}

function statusOf(error: Error): number {
  return error instanceof DetailedError ? (error.originalResponse?.getStatus() ?? 0) : 0;
}

function detailOf(error: Error): string | null {
  const body = error instanceof DetailedError ? error.originalResponse?.getBody() : undefined;
  if (!body) return null;
  try {
    const parsed: unknown = JSON.parse(body);
    const isProblem = typeof parsed === "object" && parsed !== null && "detail" in parsed;
    return isProblem && typeof parsed.detail === "string" ? parsed.detail : null;
  } catch {
    return null;
  }
}
