"use client";

import { useActionState } from "react";
import { PASSWORD_HINT } from "@/components/account/password-hint";
import { Button } from "@/components/ui/button";
import { FormMessage } from "@/components/ui/form-message";
import { PasswordField } from "@/components/ui/password-field";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

interface PasswordFormProps {
  /** Not changed here: it tells password managers which account the new password belongs to. */
  readonly email: string;
  readonly action: FormAction;
}

export function PasswordForm({ email, action }: PasswordFormProps) {
  const [state, submit, isBusy] = useActionState(action, UNTOUCHED_FORM);
  return (
    <form action={submit} className="mt-4 space-y-4">
      <FormMessage state={state} />
      <input type="hidden" name="email" autoComplete="username" value={email} />
      <PasswordField
        name="current"
        label="Current password"
        autoComplete="current-password"
        required
        error={state.fields.current}
      />
      <PasswordField
        name="next"
        label="New password"
        hint={PASSWORD_HINT}
        autoComplete="new-password"
        required
        error={state.fields.next}
      />
      <p className="text-sm text-quiet">With a new password you stay signed in here and are signed out elsewhere.</p>
      <Button type="submit" isBusy={isBusy}>
        {isBusy ? "Changing …" : "Change the password"}
      </Button>
    </form>
  );
}
