import { z } from "zod";
import { SET_ASIDE_REASONS } from "@/lib/sorting/types";

/** As many frames as one command may name: more than the largest shoots have. */
const FRAMES_MOST = 10_000;
/** More than any line's number: how far a grid may reach is `LINES_MOST`, said in words where it is planned. */
const LINE_NUMBER_MOST = 1_000;
const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** Letters of a UUID may be sent in capitals; they mean the same (RFC 9562, section 4). */
const id = z
  .string()
  .regex(/^[A-Za-z0-9_-]{1,64}$/, "not an identifier")
  .overwrite((text) => (UUID.test(text) ? text.toLowerCase() : text));
/** Named twice is named once. */
const ids = z
  .array(id)
  .min(1)
  .max(FRAMES_MOST)
  .overwrite((named) => [...new Set(named)]);
const commandId = z.uuid().overwrite((text) => text.toLowerCase());
const line = z.int().min(1).max(LINE_NUMBER_MOST);
const place = z.object({ row: line, column: line });

const TOO_MANY = `at most ${FRAMES_MOST} frames`;
function isOfFrames(seen: object): boolean {
  return Object.keys(seen).length <= FRAMES_MOST;
}

/** Where the client saw each frame: in a stack, or loose (null). The command is refused where that is no longer so. */
const framesSeen = z.record(id, id.nullable()).refine(isOfFrames, TOO_MANY);
/** What the client saw: `null` in use, else the reason. */
const setAsideSeen = z.record(id, z.enum(SET_ASIDE_REASONS).nullable()).refine(isOfFrames, TOO_MANY);
const placeSeen = z.object({ row: line.nullable(), column: line.nullable(), take: z.int().min(1) });

const base = { id: commandId, revision: z.int().min(0) };

/** Every change of the board by a person. `expect` names what the client saw; absent, the newest state is taken. */
export const boardCommandSchema = z.discriminatedUnion("type", [
  z.object({
    ...base,
    type: z.literal("move-frames"),
    frameIds: ids,
    to: z.discriminatedUnion("kind", [
      z.object({ kind: z.literal("stack"), stackId: id }),
      z.object({ kind: z.literal("new-stack"), stackId: id, place: place.nullable() }),
      z.object({ kind: z.literal("loose") }),
    ]),
    expect: framesSeen.optional(),
  }),
  z.object({
    ...base,
    type: z.literal("split-stack"),
    stackId: id,
    /** This frame and those taken after it go into the new stack. */
    atFrameId: id,
    newStackId: id,
    place: place.nullable(),
    expect: framesSeen.optional(),
  }),
  z.object({ ...base, type: z.literal("merge-stacks"), intoStackId: id, stackIds: ids, expect: framesSeen.optional() }),
  z.object({
    ...base,
    type: z.literal("place-stack"),
    stackId: id,
    /** Null: out of the grid. */
    place: place.nullable(),
    /** What happens to a stack that is there: swap places, push the line along, or become its other take. */
    occupied: z.enum(["refuse", "swap", "push", "take"]).default("refuse"),
    expect: placeSeen.optional(),
  }),
  z.object({
    ...base,
    type: z.literal("set-aside"),
    frameIds: ids,
    reason: z.enum(SET_ASIDE_REASONS).default("by hand"),
    expect: setAsideSeen.optional(),
  }),
  z.object({ ...base, type: z.literal("bring-back"), frameIds: ids, expect: setAsideSeen.optional() }),
  z.object({
    ...base,
    type: z.literal("choose-reference"),
    stackId: id,
    frameId: id,
    expect: z.object({ referenceId: id.nullable() }).optional(),
  }),
  z.object({ ...base, type: z.literal("choose-take"), stackId: id }),
  /** A new empty line before line `at`; one past the last adds at the edge. */
  z.object({ ...base, type: z.literal("add-line"), axis: z.enum(["row", "column"]), at: line }),
  z.object({ ...base, type: z.literal("remove-line"), axis: z.enum(["row", "column"]), at: line }),
  z.object({
    ...base,
    type: z.literal("settle"),
    target: z.discriminatedUnion("kind", [
      z.object({
        kind: z.literal("question"),
        questionId: id,
        /** Index into the question's answers; null: it is no question (keep as it is). */
        answer: z.int().min(0).max(20).nullable(),
        /** Id for the new stack where the answer makes one. */
        newStackId: id.optional(),
      }),
      z.object({ kind: z.literal("stack"), stackId: id, isSettled: z.boolean() }),
    ]),
  }),
  z.object({ ...base, type: z.literal("assign"), stackIds: ids, userId: id.nullable() }),
  /** Takes back one's own earlier command; redo is the undo of an undo. */
  z.object({ ...base, type: z.literal("undo"), commandId }),
  /** Takes back, as one new step, everything after this revision, whoever did it. */
  z.object({ ...base, type: z.literal("undo-back-to"), toRevision: z.int().min(0) }),
]);

export type BoardCommand = z.infer<typeof boardCommandSchema>;
export type CommandOf<Type extends BoardCommand["type"]> = Extract<BoardCommand, { type: Type }>;
/** Commands that are planned from the board alone; an undo is planned from the record. */
export type PlannedCommand = Exclude<BoardCommand, { type: "undo" | "undo-back-to" }>;
type Draft<Command> = Command extends unknown ? Omit<Command, "id" | "revision"> : never;
/** What a person asks for; whoever sends it adds its id and the revision that was seen. */
export type CommandDraft = Draft<z.input<typeof boardCommandSchema>>;
