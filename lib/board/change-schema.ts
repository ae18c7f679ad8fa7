import { z } from "zod";
import type { Change } from "@/lib/board/changes";
import { frameSchema, questionSchema, seamSchema, stackSchema } from "@/lib/board/schema";

const id = z.string();
const framePatchSchema = frameSchema
  .pick({
    stackId: true,
    setAside: true,
    placedBy: true,
    relativeSharpness: true,
    shift: true,
    confidence: true,
    reason: true,
  })
  .partial();
const stackPatchSchema = stackSchema.omit({ id: true }).partial();
const gridSizeSchema = z.object({ rows: z.int(), columns: z.int() });

/** One step as it is sent to pages. */
export const changeSchema: z.ZodType<Change> = z.discriminatedUnion("on", [
  z.object({ on: z.literal("frame"), id, before: framePatchSchema, after: framePatchSchema }),
  z.object({ on: z.literal("stack"), id, before: stackPatchSchema, after: stackPatchSchema }),
  z.object({ on: z.literal("new-stack"), stack: stackSchema }),
  z.object({ on: z.literal("no-stack"), stack: stackSchema }),
  z.object({
    on: z.literal("line"),
    axis: z.enum(["row", "column"]),
    at: z.int(),
    by: z.union([z.literal(1), z.literal(-1)]),
  }),
  z.object({ on: z.literal("grid"), before: gridSizeSchema, after: gridSizeSchema }),
  z.object({
    on: z.literal("question"),
    question: questionSchema,
    isOpen: z.boolean(),
    isWithdrawn: z.boolean().optional(),
  }),
  z.object({ on: z.literal("seams"), before: z.array(seamSchema), after: z.array(seamSchema) }),
]);
