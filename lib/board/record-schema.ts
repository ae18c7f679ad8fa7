import { z } from "zod";

/** Query of the change record: entries before a revision, of one person, on one tile. */
export const recordQuerySchema = z.object({
  before: z.coerce.number().int().min(0).optional(),
  person: z.string().min(1).max(64).optional(),
  tile: z
    .string()
    .regex(/^[A-Z]{1,3}[1-9][0-9]{0,3}$/, "not a tile's name, as A1 or B12")
    .optional(),
});
export type RecordQuery = z.infer<typeof recordQuerySchema>;
