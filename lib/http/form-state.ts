/** What a form's server action answers, for `useActionState`. */
export interface FormState {
  readonly status: "idle" | "done" | "refused";
  /** For the form as a whole; null where the fields say it all. */
  readonly message: string | null;
  /** By field name: what is wrong and how to mend it. */
  readonly fields: Readonly<Record<string, string>>;
  /** What was typed, to be shown again; never passwords. */
  readonly values: Readonly<Record<string, string>>;
}

export const UNTOUCHED_FORM: FormState = { status: "idle", message: null, fields: {}, values: {} };

/** A form's server action, as `useActionState` takes it. */
export type FormAction = (before: FormState, form: FormData) => Promise<FormState>;
