"use client";

import { useActionState } from "react";
import { describeDevice } from "@/components/account/device-name";
import { Button } from "@/components/ui/button";
import { Chip } from "@/components/ui/chip";
import { FormMessage } from "@/components/ui/form-message";
import { LocalTime } from "@/components/ui/local-time";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

interface ListedSession {
  readonly id: string;
  readonly device: string;
  readonly createdAtMs: number;
  readonly lastSeenAtMs: number;
  readonly isThisOne: boolean;
}

interface SessionListProps {
  readonly sessions: readonly ListedSession[];
  /** Field `sessionId`. */
  readonly endAction: FormAction;
  readonly endOthersAction: FormAction;
}

export function SessionList({ sessions, endAction, endOthersAction }: SessionListProps) {
  const [ended, end, isEnding] = useActionState(endAction, UNTOUCHED_FORM);
  const [endedOthers, endOthers, isEndingOthers] = useActionState(endOthersAction, UNTOUCHED_FORM);
  return (
    <div className="mt-4 space-y-4">
      <FormMessage state={ended} />
      <FormMessage state={endedOthers} />
      <ul className="divide-y divide-hairline border-y">
        {sessions.map((session) => (
          <li key={session.id} className="flex flex-wrap items-center gap-x-4 gap-y-2 py-3">
            <SessionFacts session={session} />
            {session.isThisOne ? (
              <Chip>this browser</Chip>
            ) : (
              <form action={end}>
                <input type="hidden" name="sessionId" value={session.id} />
                <Button
                  type="submit"
                  size="slim"
                  isBusy={isEnding}
                  aria-label={`Sign out ${describeDevice(session.device)}`}
                >
                  Sign out
                </Button>
              </form>
            )}
          </li>
        ))}
      </ul>
      {sessions.length > 1 && (
        <form action={endOthers}>
          <Button type="submit" isBusy={isEndingOthers}>
            Sign out everywhere else
          </Button>
        </form>
      )}
    </div>
  );
}

function SessionFacts({ session }: { readonly session: ListedSession }) {
  return (
    <div className="min-w-0 flex-1">
      <p className="font-semibold">{describeDevice(session.device)}</p>
      <p className="text-sm text-quiet">
        since <LocalTime atMs={session.createdAtMs} />
        {!session.isThisOne && (
          <>
            , last seen <LocalTime atMs={session.lastSeenAtMs} />
          </>
        )}
      </p>
    </div>
  );
}
