import type { Metadata } from "next";
import {
  changeNameForm,
  changePasswordForm,
  endOtherSessionsForm,
  endSessionForm,
} from "@/app/(signed-in)/account/actions";
import { NameForm } from "@/components/account/name-form";
import { PasswordForm } from "@/components/account/password-form";
import { SessionList } from "@/components/account/session-list";
import { PageFrame } from "@/components/shell/page-frame";
import { openSession } from "@/lib/auth/page-gate";
import { listSessions } from "@/lib/people/reads";

export const metadata: Metadata = { title: "Account" };

export default async function AccountPage() {
  const user = await openSession();
  const sessions = await listSessions(user);
  return (
    <PageFrame person={user}>
      <h1 className="text-3xl font-bold">Account</h1>
      <p className="mt-2">
        {user.email}
        {user.isAdministrator && " · administrator of this installation"}
      </p>
      <div className="mt-8 grid gap-x-12 gap-y-10 md:grid-cols-2">
        <section aria-labelledby="name-heading" className="border-t border-ink pt-5">
          <h2 id="name-heading" className="text-xl font-bold">
            Name
          </h2>
          <NameForm name={user.name} action={changeNameForm} />
        </section>
        <section aria-labelledby="password-heading" className="border-t border-ink pt-5 md:row-span-2">
          <h2 id="password-heading" className="text-xl font-bold">
            Password
          </h2>
          <PasswordForm email={user.email} action={changePasswordForm} />
        </section>
        <section aria-labelledby="sessions-heading" className="border-t border-ink pt-5">
          <h2 id="sessions-heading" className="text-xl font-bold">
            Where you are signed in
          </h2>
          <SessionList sessions={sessions} endAction={endSessionForm} endOthersAction={endOtherSessionsForm} />
        </section>
      </div>
    </PageFrame>
  );
}
