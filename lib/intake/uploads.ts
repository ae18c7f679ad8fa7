import "server-only";
import { requireProject, requireUser } from "@/lib/auth/gate";
import { AppError } from "@/lib/errors/app-error";
import { newId, type UploadId, uploadIdSchema } from "@/lib/ids";
import { finishIfComplete } from "@/lib/intake/finish";
import { findOwnUpload, findUpload, type UploadRecord } from "@/lib/intake/reads";
import { answerByTus } from "@/lib/intake/tus-server";
import { parseUploadMetadata } from "@/lib/intake/upload-metadata";
import { cancelUpload } from "@/lib/intake/writes";
import { removeStored, requireSpace } from "@/lib/storage/disk";

/**
 * tus creation (with or without the first bytes).
 * @throws AppError unauthenticated, invalid, not_found, forbidden, too_large, not_supported, storage_full
 */
export async function beginUpload(request: Request): Promise<Response> {
  const user = await requireUser();
  requireProtocol(request.headers);
  const metadataHeader = request.headers.get("upload-metadata") ?? "";
  const facts = parseUploadMetadata(metadataHeader);
  await requireProject(facts.projectId, "edit");
  if (request.headers.has("upload-concat") || request.headers.has("upload-defer-length")) {
    throw new AppError("not_supported", "One file is one upload, and its Upload-Length is known when it is created.");
  }
  const id = uploadIdSchema.parse(newId());
  try {
    return await answerByTus(request, { id, userId: user.id, facts, metadataHeader });
  } catch (error) {
    // Nobody has been told of it: it must not stand in the list as under way.
    await discardUpload(id);
    throw error;
  }
}

/** tus HEAD: how far an upload is. One that is complete but was not recorded (a process was killed) is recorded now. */
export async function inspectUpload(request: Request, id: UploadId): Promise<Response> {
  await requireOwnUpload(request, id);
  await finishIfComplete(id);
  return answerByTus(request);
}

/**
 * tus PATCH: takes bytes.
 * @throws AppError not_found, invalid, unsupported_media_type, conflict (wrong offset), too_large, storage_full
 */
export async function continueUpload(request: Request, id: UploadId): Promise<Response> {
  const upload = await requireOwnUpload(request, id);
  const { headers } = request;
  if (headers.get("content-type") !== "application/offset+octet-stream") {
    throw new AppError("unsupported_media_type", "Send the bytes as application/offset+octet-stream.");
  }
  const offset = headers.get("upload-offset");
  if (offset === null) throw new AppError("invalid", "Upload-Offset is missing.");
  const declared = headers.get("content-length");
  await requireSpace(upload.finishedAtMs === null ? Number(declared ?? 0) : 0);
  const response = await takeBytes(request, id);
  const taken = Number(response.headers.get("upload-offset")) - Number(offset);
  if (declared !== null && taken !== Number(declared)) {
    throw new AppError("conflict", `${declared} bytes were announced, ${taken} arrived. Go on from what HEAD says.`);
  }
  return response;
}

/** An upload that was cancelled, or whose project was deleted, while bytes came in is gone, whatever became of them. */
async function takeBytes(request: Request, id: UploadId): Promise<Response> {
  const answer = await answerByTus(request).catch((error: unknown) => ({ error }));
  if (!(await findUpload(id))) throw noSuchUpload();
  if ("error" in answer) throw answer.error;
  return answer;
}

/** tus termination: cancels an upload whose last byte is not in. What has arrived is never taken back. */
export async function endUpload(request: Request, id: UploadId): Promise<Response> {
  const upload = await requireOwnUpload(request, id);
  if (upload.finishedAtMs !== null || (await finishIfComplete(id))) {
    throw new AppError("forbidden", "This file has arrived and is recorded: an original is not taken back.");
  }
  return answerByTus(request);
}

/** Only for who began it, while they may edit the project: all others learn nothing of it. */
async function requireOwnUpload(request: Request, id: UploadId): Promise<UploadRecord> {
  const user = await requireUser();
  requireProtocol(request.headers);
  const upload = await findOwnUpload(user.id, id);
  if (!upload || !(await mayEdit(upload))) throw noSuchUpload();
  return upload;
}

function noSuchUpload(): AppError {
  return new AppError("not_found", "There is no such upload, or it is not yours.");
}

async function mayEdit(upload: UploadRecord): Promise<boolean> {
  try {
    await requireProject(upload.projectId, "edit");
    return true;
  } catch (error) {
    if (error instanceof AppError && error.code !== "unauthenticated") return false;
    throw error;
  }
}

function requireProtocol(headers: Headers): void {
  if (headers.get("tus-resumable") !== "1.0.0") {
    throw new AppError("precondition_failed", "This speaks tus 1.0.0: send Tus-Resumable: 1.0.0.");
  }
  // The tus server would take the bytes without looking at it, and the client would believe that they were checked.
  if (headers.has("upload-checksum")) {
    throw new AppError(
      "invalid",
      "Upload-Checksum is not supported: leave it out. Files are hashed after they arrive.",
    );
  }
}

async function discardUpload(id: UploadId): Promise<void> {
  if (await cancelUpload(id, Date.now())) await removeStored({ uploadIds: [id], fileIds: [] });
}
