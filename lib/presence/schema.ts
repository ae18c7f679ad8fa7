import { z } from "zod";
import { singleLineSchema } from "@/lib/text/single-line";

/** Longer than any tile's name ("AAA1000", "Stack 1000"). */
const TILE_CHARACTERS = 40;

/** `POST /api/projects/{id}/presence`: the tile that is open; null: the board, and no tile. Sent again every 15 s. */
export const presencePostSchema = z.strictObject({
  tile: singleLineSchema(TILE_CHARACTERS).nullable(),
  /** The board is being closed: whoever says so is not here any more. */
  isLeaving: z.boolean().default(false),
});
