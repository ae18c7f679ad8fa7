import { z } from "zod";
import { fileIdSchema, uploadIdSchema } from "@/lib/ids";

/** What happened in a project, for pages that are open: ids and versions, not data. */
export const projectEventSchema = z.discriminatedUnion("type", [
  z.object({ type: z.literal("upload.created"), uploadId: uploadIdSchema }),
  z.object({ type: z.literal("upload.cancelled"), uploadId: uploadIdSchema }),
  z.object({ type: z.literal("file.received"), fileId: fileIdSchema }),
  /** Measured, hashed, found unreadable or found to be a duplicate: the list says which. */
  z.object({ type: z.literal("file.analysed"), fileId: fileIdSchema }),
  z.object({ type: z.literal("board.changed"), revision: z.int() }),
  z.object({ type: z.literal("sort.failed") }),
  /** Somebody came, went, or opened another tile. */
  z.object({ type: z.literal("people.moved") }),
  /** The stream cannot tell what was missed: fetch everything anew. */
  z.object({ type: z.literal("missed") }),
]);
export type ProjectEvent = z.infer<typeof projectEventSchema>;

/** Names of the events on the stream: one name, so that one listener hears them all. */
export const STREAM_EVENT_NAME = "project";

export function eventsUrl(projectId: string): string {
  return `/api/projects/${projectId}/events`;
}
