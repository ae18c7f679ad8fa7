"use client";

import { useActionState } from "react";
import { FormMessage } from "@/components/ui/form-message";
import { signInAndLeave } from "@/components/account/sign-in";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { PasswordField } from "@/components/ui/password-field";
import { UNTOUCHED_FORM, type FormAction, type FormState } from "@/lib/http/form-state";
import { PASSWORD_HINT } from "@/components/account/password-hint";

/** Makes the account and signs it in at once: the password is at hand only here. */
export function FirstAccountForm({ action }: { readonly action: FormAction }) {
  const [state, submit, isBusy] = useActionState(async (before: FormState, form: FormData): Promise<FormState> => {
    const made = await action(before, form);
    if (made.status !== "done") return made;
    const refusal = await signInAndLeave({
      email: String(form.get("email") ?? ""),
      password: String(form.get("password") ?? ""),
      returnPath: "/projects",
    });
    if (refusal === null) return made;
    return { ...made, status: "refused", message: `The account is made, but signing in did not work. ${refusal}` };
  }, UNTOUCHED_FORM);

  return (
    <form action={submit} className="mt-6 space-y-5">
      <FormMessage state={state} />
      <Field
        name="name"
        label="Name"
        hint="As the others in a project see it."
        autoComplete="name"
        required
        defaultValue={state.values.name}
        error={state.fields.name}
      />
      <Field
        name="email"
        label="E-mail"
        hint="You sign in with it."
        type="email"
        autoComplete="username"
        required
        defaultValue={state.values.email}
        error={state.fields.email}
      />
      <PasswordField
        name="password"
        label="Password"
        hint={PASSWORD_HINT}
        autoComplete="new-password"
        required
        error={state.fields.password}
      />
      <Button type="submit" tone="petrol" isBusy={isBusy}>
        {isBusy ? "Making the account …" : "Make the account"}
      </Button>
    </form>
  );
}
