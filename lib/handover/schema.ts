import { z } from "zod";

/** Query of the manifest routes. `download` makes the browser save the answer under the project's name. */
export const manifestQuerySchema = z.object({
  share: z.string().min(1).max(320).optional(),
  download: z.string().optional(),
});
