import { z } from "zod";
import { singleLineSchema } from "@/lib/text/single-line";

/** Fits a heading on two lines and a file name. */
const NAME_CHARACTERS = 120;
/** A tile shot more often than this is a film, not a stack. */
const FRAMES_MOST = 1000;
/** A day: nobody waits longer inside a tile. */
const PAUSE_MOST_SECONDS = 86_400;
/** Rows end at ZZ (702) by the naming of tiles; the same for columns. */
const LINES_MOST = 702;

/** Fraction of the tile's side. Trade practice warns under about a quarter. */
export const DEFAULT_OVERLAP_WANTED = 0.25;
/** 4 frames halve the noise; 12 leave enough where people walk through. */
export const DEFAULT_FRAMES_PER_TILE = { least: 4, most: 12 } as const;

export const projectNameSchema = singleLineSchema(NAME_CHARACTERS);

const overlapWantedSchema = z.number("give a number from 0 to 0.95").min(0, "0 or more").max(0.95, "at most 0.95");
const framesSchema = z.number("give a whole number").int("a whole number").min(1, "1 or more").max(FRAMES_MOST);
const framesPerTileSchema = z
  .strictObject({ least: framesSchema, most: framesSchema })
  .refine(({ least, most }) => least <= most, { path: ["most"], message: "at least as many as the least" });
const lineCountSchema = z.number().int("a whole number").min(1, "1 or more").max(LINES_MOST).nullable();

export const newProjectSchema = z.strictObject({
  name: projectNameSchema,
  overlapWanted: overlapWantedSchema.default(DEFAULT_OVERLAP_WANTED),
  framesPerTile: framesPerTileSchema.default(DEFAULT_FRAMES_PER_TILE),
});

/** What a lead may change; what is absent stays. */
export const projectChangeSchema = z
  .strictObject({
    name: projectNameSchema,
    isArchived: z.boolean(),
    overlapWanted: overlapWantedSchema,
    framesPerTile: framesPerTileSchema,
    /** Seconds; null: the computation finds it. */
    longestPauseSeconds: z.number().positive("more than 0").max(PAUSE_MOST_SECONDS, "at most a day").nullable(),
    /** Null: not known beforehand. */
    expectedRows: lineCountSchema,
    expectedColumns: lineCountSchema,
  })
  .partial()
  .refine((change) => Object.keys(change).length > 0, "say what to change");

/** Deleting asks for the project's name, typed. */
export const projectRemovalSchema = z.strictObject({ confirmation: z.string("type the project's name") });

export type NewProject = z.infer<typeof newProjectSchema>;
export type ProjectChange = z.infer<typeof projectChangeSchema>;
export type ProjectSettings = Omit<ProjectChange, "name" | "isArchived">;

/** What the job ticket reads of `GET /api/projects/{id}`. */
export const projectStatusSchema = z.object({
  frames: z.int(),
  tiles: z.int(),
  openQuestions: z.int(),
  rows: z.int(),
  columns: z.int(),
});
export type ProjectStatus = z.infer<typeof projectStatusSchema>;
