"use server";

import { parseForm, runForm, textOf } from "@/lib/http/form-action";
import type { FormState } from "@/lib/http/form-state";
import { newAccountSchema } from "@/lib/people/schema";
import { createFirstAccount } from "@/lib/people/writes";

/** Public on purpose; `createFirstAccount` refuses once there is an account. */
export async function makeFirstAccount(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const input = { email: textOf(form, "email"), name: textOf(form, "name"), password: textOf(form, "password") };
    await createFirstAccount(parseForm(newAccountSchema, input));
    return "The account is made.";
  });
}
