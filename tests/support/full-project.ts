import { writeFile } from "node:fs/promises";
import sharp from "sharp";
import { writeTransaction } from "@/db/client";
import { files, frames, uploads } from "@/db/schema/frames";
import type { FrameMeasurements } from "@/lib/analysis/types";
import {
  fileIdSchema,
  frameIdSchema,
  newId,
  uploadIdSchema,
  type FileId,
  type FrameId,
  type ProjectId,
  type UploadId,
} from "@/lib/ids";
import type { CaptureMetadata } from "@/lib/metadata/types";
import { originalPath, prepareStorage, previewPath, registrationPath, thumbnailPath } from "@/lib/storage/paths";
import type { Person } from "./people";

export const FRAME_WIDTH_PX = 64;
export const FRAME_HEIGHT_PX = 48;

export interface StoredFrame {
  readonly frameId: FrameId;
  readonly fileId: FileId;
  readonly uploadId: UploadId;
  /** Everything it has on the disk, bytes. */
  readonly storedBytes: number;
}

/** One analysed frame with its original and previews on the disk, as if it had come through the intake. */
export async function addStoredFrame(projectId: ProjectId, person: Person, name: string): Promise<StoredFrame> {
  const uploadId = uploadIdSchema.parse(newId());
  const fileId = fileIdSchema.parse(newId());
  const frameId = frameIdSchema.parse(newId());
  const picture = await sharp({
    create: { width: FRAME_WIDTH_PX, height: FRAME_HEIGHT_PX, channels: 3, background: "#7a8288" },
  })
    .jpeg()
    .toBuffer();
  await prepareStorage();
  const targets = [originalPath(uploadId), previewPath(fileId), thumbnailPath(fileId), registrationPath(fileId)];
  await Promise.all(targets.map((target) => writeFile(target, picture)));
  const nowMs = Date.now();
  await writeTransaction(async (tx) => {
    await tx.insert(uploads).values({
      id: uploadId,
      projectId,
      userId: person.id,
      name,
      lengthBytes: picture.length,
      metadataHeader: "",
      createdAtMs: nowMs,
      finishedAtMs: nowMs,
    });
    await tx
      .insert(frames)
      .values({ id: frameId, projectId, metadata: METADATA, measurements: MEASUREMENTS, createdAtMs: nowMs });
    await tx.insert(files).values({
      id: fileId,
      projectId,
      frameId,
      uploadId,
      name,
      pairingKey: name,
      bytes: picture.length,
      sha256: "0".repeat(64),
      mediaType: "image/jpeg",
      state: "analysed",
      isRaw: false,
      receivedAtMs: nowMs,
    });
  });
  return { frameId, fileId, uploadId, storedBytes: picture.length * targets.length };
}

/** An upload that this person has begun and whose bytes are not in. */
export async function addUnfinishedUpload(projectId: ProjectId, person: Person, name: string): Promise<UploadId> {
  const id = uploadIdSchema.parse(newId());
  await prepareStorage();
  await writeFile(originalPath(id), "");
  await writeTransaction((tx) =>
    tx.insert(uploads).values({
      id,
      projectId,
      userId: person.id,
      name,
      lengthBytes: 4,
      metadataHeader: `filename ${Buffer.from(name).toString("base64")}`,
      createdAtMs: Date.now(),
    }),
  );
  return id;
}

const METADATA: CaptureMetadata = {
  takenAt: null,
  make: null,
  model: null,
  serial: null,
  lens: null,
  exposureSeconds: null,
  aperture: null,
  iso: null,
  focalLengthMm: null,
  orientation: 1,
};

const MEASUREMENTS: FrameMeasurements = {
  widthPx: FRAME_WIDTH_PX,
  heightPx: FRAME_HEIGHT_PX,
  laplacianVariance: 0,
  meanBrightness: 130,
  texture: 0,
  patches: { columns: 0, rows: 0, full: [], half: [], brightness: [] },
};
