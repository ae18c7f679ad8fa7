import "server-only";
import type { ProjectAccess } from "@/lib/auth/gate";
import { findSortError, listIntakeFiles } from "@/lib/frames/reads";
import type { IntakeList, UnfinishedUpload } from "@/lib/frames/schema";
import { listUnfinishedUploads } from "@/lib/intake/reads";
import { UPLOADS_PATH } from "@/lib/intake/tus-server";
import { storedBytes } from "@/lib/storage/disk";

/** What came in, what was refused and why, what is still under way and how far. */
export async function getIntakeList(access: ProjectAccess): Promise<IntakeList> {
  const uploads = await listUnfinishedUploads(access);
  const underWay = uploads.map(async ({ userId, ...upload }): Promise<UnfinishedUpload> => {
    const receivedBytes = (await storedBytes(upload.id)) ?? 0;
    return { ...upload, url: `${UPLOADS_PATH}/${upload.id}`, receivedBytes, isMine: userId === access.userId };
  });
  return {
    files: await listIntakeFiles(access),
    uploads: await Promise.all(underWay),
    sortError: await findSortError(access),
  };
}
