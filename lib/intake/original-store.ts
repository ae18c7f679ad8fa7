import "server-only";
import { pipeline, Transform } from "node:stream";
import { FileStore } from "@tus/file-store";
import { Metadata, Upload } from "@tus/server";
import { AppError } from "@/lib/errors/app-error";
import { uploadIdSchema } from "@/lib/ids";
import { findUpload } from "@/lib/intake/reads";
import { cancelUpload } from "@/lib/intake/writes";
import { removeStored, requireSpace } from "@/lib/storage/disk";
import { originalsFolder } from "@/lib/storage/paths";

/** While bytes come in, the storage reserve is looked at again after so many. */
const SPACE_CHECK_BYTES = 64 * 1024 * 1024;

type Written = Parameters<FileStore["write"]>[0];

/**
 * tus's file store on the originals: bytes are written under the upload's id from the first on and stay there. What is
 * known of an upload is in the database alone, so that there is nothing to disagree with it.
 */
export class OriginalStore extends FileStore {
  constructor() {
    super({ directory: originalsFolder(), configstore: uploadsInDatabase });
    // Neither deferred lengths nor expiry: the length decides when a file is complete, and nothing is thrown away unasked.
    this.extensions = ["creation", "creation-with-upload", "termination"];
  }

  override async write(bytes: Written, id: string, offset: number): Promise<number> {
    const guard = new SpaceGuard();
    try {
      // pipeline, not pipe: a client that goes away must end the writing too. The failure comes out of `guard`.
      return await super.write(
        pipeline(bytes, guard, () => {}),
        id,
        offset,
      );
    } catch (error) {
      await requireSpace(0);
      throw guard.refusal ?? error;
    }
  }

  override async remove(id: string): Promise<void> {
    const uploadId = uploadIdSchema.parse(id);
    if (!(await cancelUpload(uploadId, Date.now()))) {
      throw new AppError("forbidden", "This file has arrived and is recorded: an original is not taken back.");
    }
    await removeStored({ uploadIds: [uploadId], fileIds: [] });
  }
}

const uploadsInDatabase = {
  async get(id: string): Promise<Upload | undefined> {
    const found = await findUpload(uploadIdSchema.parse(id));
    if (!found) return undefined;
    return new Upload({
      id: found.id,
      size: found.lengthBytes,
      offset: 0,
      metadata: Metadata.parse(found.metadataHeader),
      creation_date: new Date(found.createdAtMs).toISOString(),
    });
  },
  /** The row is there before the store is asked to create the file. */
  async set(): Promise<void> {},
  async delete(): Promise<void> {},
};

/** Passes bytes on until the storage reserve is reached. */
class SpaceGuard extends Transform {
  refusal: unknown;
  private uncheckedBytes = 0;

  override _transform(chunk: Buffer, _encoding: BufferEncoding, done: (error?: Error | null, chunk?: Buffer) => void) {
    this.uncheckedBytes += chunk.byteLength;
    if (this.uncheckedBytes < SPACE_CHECK_BYTES) return done(null, chunk);
    this.uncheckedBytes = 0;
    return void requireSpace(0).then(
      () => done(null, chunk),
      (error: Error) => {
        this.refusal = error;
        done(error);
      },
    );
  }
}
