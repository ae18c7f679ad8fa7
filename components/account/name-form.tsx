"use client";

import { useActionState } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { FormMessage } from "@/components/ui/form-message";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

export function NameForm({ name, action }: { readonly name: string; readonly action: FormAction }) {
  const [state, submit, isBusy] = useActionState(action, UNTOUCHED_FORM);
  return (
    <form action={submit} className="mt-4 space-y-4">
      <FormMessage state={state} />
      <Field
        name="name"
        label="Your name"
        hint="As the others in a project see it."
        autoComplete="name"
        required
        defaultValue={state.values.name ?? name}
        error={state.fields.name}
      />
      <Button type="submit" isBusy={isBusy}>
        Save the name
      </Button>
    </form>
  );
}
