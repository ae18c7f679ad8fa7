import { z } from "zod";
import { numberOf, parseForm, textOf } from "@/lib/http/form-action";
import { newProjectSchema, type NewProject } from "@/lib/projects/schema";

// People give the overlap in per cent; everything behind the form has it as a fraction of the tile's side.
const perCentSchema = z
  .number("Give a number from 0 to 95.")
  .min(0, "Give a number from 0 to 95.")
  .max(95, "Give a number from 0 to 95.")
  .transform((perCent) => perCent / 100);

const formSchema = newProjectSchema.extend({ overlapWanted: perCentSchema });

/**
 * The fields shared by "new project" and the settings: `name`, `overlapWanted` (per cent), `least`, `most`.
 * @throws AppError invalid, by those names
 */
export function readProjectForm(form: FormData): NewProject {
  const input = {
    name: textOf(form, "name"),
    overlapWanted: numberOf(form, "overlapWanted"),
    framesPerTile: { least: numberOf(form, "least"), most: numberOf(form, "most") },
  };
  return parseForm(formSchema, input, (path) => String(path.at(-1) ?? ""));
}
