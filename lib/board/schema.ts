import { z } from "zod";
import type { Board } from "@/lib/board/model";
import { QUESTION_KINDS, SET_ASIDE_REASONS } from "@/lib/sorting/types";
import type { Orientation } from "@/lib/metadata/types";

const pointSchema = z.object({ xPx: z.number(), yPx: z.number() }).nullable();
const placedBySchema = z.enum(["computation", "person"]);
const setAsideSchema = z.enum(SET_ASIDE_REASONS);

const shotOrderSchema = z.object({
  along: z.enum(["rows", "columns"]),
  from: z.enum(["top-left", "top-right", "bottom-left", "bottom-right"]),
  turns: z.boolean(),
});

export const stackSchema = z.object({
  id: z.string(),
  row: z.int().nullable(),
  column: z.int().nullable(),
  take: z.int(),
  isChosenTake: z.boolean(),
  referenceId: z.string().nullable(),
  isSettled: z.boolean(),
  shareUserId: z.string().nullable(),
  confidence: z.number(),
  reason: z.string(),
  position: pointSchema,
  spot: z.object({ x: z.number(), y: z.number() }),
  placedBy: placedBySchema,
});

const takenAtSchema = z.object({
  local: z.string(),
  localMs: z.number(),
  hasFraction: z.boolean(),
  offsetMinutes: z.number().nullable(),
});

const ORIENTATIONS = [1, 2, 3, 4, 5, 6, 7, 8] as const satisfies readonly Orientation[];

const metadataSchema = z.object({
  takenAt: takenAtSchema.nullable(),
  make: z.string().nullable(),
  model: z.string().nullable(),
  serial: z.string().nullable(),
  lens: z.string().nullable(),
  exposureSeconds: z.number().nullable(),
  aperture: z.number().nullable(),
  iso: z.number().nullable(),
  focalLengthMm: z.number().nullable(),
  orientation: z.literal(ORIENTATIONS),
});

const frameFileSchema = z.object({
  id: z.string(),
  name: z.string(),
  folder: z.string().nullable(),
  bytes: z.number(),
  sha256: z.string(),
  mediaType: z.string(),
});

export const frameSchema = z.object({
  id: z.string(),
  name: z.string(),
  files: z.array(frameFileSchema),
  metadata: metadataSchema,
  widthPx: z.number(),
  heightPx: z.number(),
  orderTaken: z.int(),
  stackId: z.string().nullable(),
  setAside: setAsideSchema.nullable(),
  laplacianVariance: z.number(),
  meanBrightness: z.number(),
  relativeSharpness: z.number().nullable(),
  shift: pointSchema,
  pauseBeforeSeconds: z.number().nullable(),
  confidence: z.number(),
  reason: z.string(),
  placedBy: placedBySchema,
});

const idsSchema = z.array(z.string());

const answerActionSchema = z.discriminatedUnion("type", [
  z.object({ type: z.literal("keep") }),
  z.object({ type: z.literal("move-frames"), frameIds: idsSchema, toStackId: z.string().nullable() }),
  z.object({ type: z.literal("set-aside"), frameIds: idsSchema, reason: setAsideSchema }),
  z.object({ type: z.literal("bring-back"), frameIds: idsSchema }),
  z.object({ type: z.literal("choose-take"), stackId: z.string() }),
  z.object({ type: z.literal("merge-stacks"), stackIds: idsSchema }),
  z.object({ type: z.literal("split-stack"), stackId: z.string(), atFrameId: z.string() }),
  z.object({ type: z.literal("new-stack"), frameIds: idsSchema }),
  z.object({ type: z.literal("take-out"), stackIds: idsSchema }),
]);

export const questionSchema = z.object({
  id: z.string(),
  key: z.string(),
  kind: z.enum(QUESTION_KINDS),
  message: z.string(),
  evidence: z.string(),
  frameIds: idsSchema,
  stackIds: idsSchema,
  tile: z.string().nullable(),
  answers: z.array(z.object({ label: z.string(), action: answerActionSchema })),
  severity: z.number(),
});

export const seamSchema = z.object({
  stackId: z.string(),
  neighbourId: z.string(),
  side: z.enum(["right", "below"]),
  overlap: z.number().nullable(),
});

/** `GET /api/projects/{id}/board`. */
export const boardSchema: z.ZodType<Board> = z.object({
  projectId: z.string(),
  projectName: z.string(),
  revision: z.int(),
  grid: z.object({
    rows: z.int(),
    columns: z.int(),
    shotOrder: shotOrderSchema.nullable(),
    overlapWanted: z.number(),
    framesPerTile: z.object({ least: z.int(), most: z.int() }),
    longestPauseSeconds: z.number().nullable(),
  }),
  stacks: z.array(stackSchema),
  frames: z.array(frameSchema),
  seams: z.array(seamSchema),
  questions: z.array(questionSchema),
  unreadable: z.array(
    z.object({
      name: z.string(),
      folder: z.string().nullable(),
      bytes: z.number(),
      sha256: z.string().nullable(),
      reason: z.string(),
    }),
  ),
  duplicates: z.array(z.object({ name: z.string(), folder: z.string().nullable(), of: z.string() })),
});

/**
 * Query of the board route. `texts=tokens`: what was said of tiles is left in tokens (`name-tokens.ts`), as pages need
 * that go on changing the board; without it all texts are in the names that tiles have now. `since` answers tokens.
 */
export const boardQuerySchema = z.object({
  since: z.coerce.number().int().min(0).optional(),
  texts: z.literal("tokens").optional(),
});
