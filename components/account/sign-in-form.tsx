"use client";

import { useState, type FormEvent } from "react";
import { signInAndLeave } from "@/components/account/sign-in";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { Notice } from "@/components/ui/notice";
import { PasswordField } from "@/components/ui/password-field";

export function SignInForm({ returnPath }: { readonly returnPath: string }) {
  const [problem, setProblem] = useState<string | null>(null);
  const [isBusy, setBusy] = useState(false);

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setProblem(null);
    setBusy(true);
    const refusal = await signInAndLeave({
      email: String(form.get("email") ?? ""),
      password: String(form.get("password") ?? ""),
      returnPath,
    });
    // Without a refusal the page is on its way out: the button stays busy.
    if (refusal === null) return;
    setProblem(refusal);
    setBusy(false);
  }

  return (
    <form method="post" onSubmit={submit} className="mt-6 space-y-5">
      {problem !== null && <Notice tone="madder" live="alert" title={problem} />}
      <Field name="email" label="E-mail" type="email" autoComplete="username" required />
      <PasswordField name="password" label="Password" autoComplete="current-password" required />
      <Button type="submit" tone="petrol" isBusy={isBusy}>
        {isBusy ? "Signing in …" : "Sign in"}
      </Button>
    </form>
  );
}
