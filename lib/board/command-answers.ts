import { z } from "zod";
import { changeSchema } from "@/lib/board/change-schema";
import { boardSchema, frameSchema, stackSchema } from "@/lib/board/schema";

/**
 * Optional header of `POST /api/projects/{id}/commands`: id of the person who gave the command. A browser that kept it
 * over a change of account must not have it done in the next person's name.
 */
export const GIVEN_BY_HEADER = "stackyard-given-by";

/** `POST /api/projects/{id}/commands`, 200: recorded. The same id again answers the same. */
export const commandAnswerSchema = z.object({
  id: z.string(),
  revision: z.int(),
  changes: z.array(changeSchema),
});
export type CommandAnswer = z.infer<typeof commandAnswerSchema>;

/** Members of the problem body of a 409 `conflict` besides `detail`: what is there now, and who made it so. */
export const conflictSchema = z.object({
  subjectId: z.string(),
  revision: z.int(),
  /** Null where it is no longer there. */
  present: z
    .union([
      z.object({ kind: z.literal("frame"), frame: frameSchema }),
      z.object({ kind: z.literal("stack"), stack: stackSchema }),
    ])
    .nullable(),
  /** The newest step that touched it. */
  lastChange: z
    .object({ id: z.string(), person: z.string().nullable(), sentence: z.string(), atMs: z.number() })
    .nullable(),
});
export type Conflict = z.infer<typeof conflictSchema>;

const toldStepSchema = z.object({
  revision: z.int(),
  person: z.object({ id: z.string(), name: z.string() }),
  sentence: z.string(),
});
export type ToldStep = z.infer<typeof toldStepSchema>;

/**
 * `GET /api/projects/{id}/board?since=REVISION`: nothing new; the steps in between; or the whole board, where the
 * steps are too many, or hold what steps do not carry (frames that came in).
 */
export const boardSinceSchema = z.union([
  z.object({ unchanged: z.literal(true), revision: z.int() }),
  z.object({
    since: z.int(),
    revision: z.int(),
    changes: z.array(changeSchema),
    /** Who did the newest of them, oldest first. */
    told: z.array(toldStepSchema),
  }),
  z.intersection(boardSchema, z.object({ full: z.literal(true) })),
]);

const stepSchema = z.object({ commandId: z.string(), sentence: z.string() });
/** `GET /api/projects/{id}/record/mine`: the next undo and redo of the signed-in person. */
export const undoStateSchema = z.object({ undo: stepSchema.nullable(), redo: stepSchema.nullable() });
export type UndoState = z.infer<typeof undoStateSchema>;

/** `GET /api/projects/{id}/record?before=&person=&tile=`: newest first, 100 at a time. */
export const recordSchema = z.object({
  entries: z.array(
    z.object({
      id: z.string(),
      revision: z.int(),
      /** Null: the computation, or an account that is gone. */
      person: z.object({ id: z.string(), name: z.string() }).nullable(),
      type: z.string(),
      sentence: z.string(),
      tiles: z.array(z.string()),
      atMs: z.number(),
      /** It has been undone. */
      isUndone: z.boolean(),
      /** Id of the step that it undoes; null: none. */
      undoes: z.string().nullable(),
      /** Everything after this revision is undone by it; null: it is no such step. */
      undoesAfter: z.int().nullable(),
    }),
  ),
  /** `before` of the next page; null: that is all. */
  next: z.int().nullable(),
  /** Everybody who did something, for the filter. */
  people: z.array(z.object({ id: z.string(), name: z.string() })),
});

export type RecordPage = z.infer<typeof recordSchema>;
export type RecordEntry = RecordPage["entries"][number];

/** `POST /api/projects/{id}/presence` `{"tile": NAME or null}` and `GET`: who has the board open now, others and oneself. */
export const presenceSchema = z.object({
  people: z.array(z.object({ userId: z.string(), name: z.string(), tile: z.string().nullable() })),
});
