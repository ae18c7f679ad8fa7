"use client";

import { useState } from "react";
import { signInAndLeave } from "@/components/account/sign-in";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import type { DemoAccount } from "@/lib/demo/accounts";

interface DemoAccountsProps {
  readonly accounts: readonly DemoAccount[];
  readonly password: string;
  readonly returnPath: string;
}

/** The demo project's invented people: one press signs in. Their password is public. */
export function DemoAccounts({ accounts, password, returnPath }: DemoAccountsProps) {
  const [busyEmail, setBusyEmail] = useState<string | null>(null);
  const [problem, setProblem] = useState<string | null>(null);

  async function enter(email: string) {
    setProblem(null);
    setBusyEmail(email);
    const refusal = await signInAndLeave({ email, password, returnPath });
    if (refusal === null) return;
    setProblem(refusal);
    setBusyEmail(null);
  }

  return (
    <section aria-labelledby="demo-heading" className="mt-10 border border-ink">
      <div className="border-b px-4 py-3">
        <h2 id="demo-heading" className="font-bold">
          Look around in the demo project
        </h2>
        <p className="text-sm text-quiet">Its people are invented and share one public password.</p>
      </div>
      {problem !== null && <Notice tone="madder" live="alert" title={problem} />}
      <ul className="divide-y divide-hairline">
        {accounts.map(({ email, name, role, task }) => (
          <li key={email} className="flex items-center gap-4 px-4 py-2.5">
            <div className="min-w-0 flex-1">
              <p className="font-semibold">
                {name}, {role}
              </p>
              <p className="text-sm text-quiet">{task}</p>
            </div>
            <Button
              size="slim"
              aria-label={`Sign in as ${name}, ${role}`}
              isBusy={busyEmail === email}
              disabled={busyEmail !== null}
              onClick={() => void enter(email)}
            >
              Sign in
            </Button>
          </li>
        ))}
      </ul>
      <p className="border-t px-4 py-2.5 text-sm text-quiet">
        Password: <span className="figures break-all text-ink">{password}</span>
      </p>
    </section>
  );
}
