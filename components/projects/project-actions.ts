import type { FormAction } from "@/lib/http/form-state";

/** What a lead can do to a project as a whole. */
export interface ProjectActions {
  /** Field `name`. */
  readonly rename: FormAction;
  /** Field `isArchived`: "true" or "false". */
  readonly archive: FormAction;
  /** Field `confirmation`: the project's name, typed. Leads to the project list. */
  readonly remove: FormAction;
}
