import { readFile, stat } from "node:fs/promises";
import path from "node:path";
import { Upload } from "tus-js-client";
import type { HttpSession } from "@/lib/demo/http-session";

export interface FileToUpload {
  readonly projectId: string;
  /** The folder that is brought in. */
  readonly root: string;
  /** Relative to it, "/"-separated. */
  readonly name: string;
}

/**
 * Uploads one file by the tus protocol, as the browser does.
 * @throws Error where the product refuses it
 */
export async function uploadFile(session: HttpSession, { projectId, root, name }: FileToUpload): Promise<void> {
  const file = path.join(root, name);
  const [bytes, { mtimeMs }] = await Promise.all([readFile(file), stat(file)]);
  const lastModified = String(Math.round(mtimeMs));
  const folder = path.posix.dirname(name) === "." ? "" : path.posix.dirname(name);
  await new Promise<void>((resolve, reject) => {
    const upload = new Upload(bytes, {
      endpoint: `${session.address}/api/uploads`,
      headers: { cookie: session.cookie },
      metadata: { projectId, filename: path.posix.basename(name), folder, lastModified },
      // The web process may be starting again: seconds, not minutes.
      retryDelays: [500, 2000, 5000],
      onSuccess: () => resolve(),
      onError: reject,
    });
    upload.start();
  });
}

/** Takes away an upload that was never finished. Already gone is fine. */
export async function terminateUpload(session: HttpSession, uploadId: string): Promise<void> {
  const response = await fetch(`${session.address}/api/uploads/${uploadId}`, {
    method: "DELETE",
    headers: { cookie: session.cookie, "tus-resumable": "1.0.0" },
  });
  if (!response.ok && response.status !== 404 && response.status !== 410) {
    throw new Error(`an unfinished upload could not be taken away (${response.status})`);
  }
}
