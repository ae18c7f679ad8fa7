import type { Metadata } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { FirstAccountForm } from "@/components/account/first-account-form";
import { makeFirstAccount } from "@/app/(public)/first-account/actions";
import { isFirstAccountOpen, listDemoAccounts } from "@/lib/people/reads";

export const metadata: Metadata = { title: "First account" };

export default async function FirstAccountPage() {
  if (!(await isFirstAccountOpen())) redirect("/sign-in");
  const hasDemo = (await listDemoAccounts()).length > 0;
  return (
    <>
      <h1 className="text-3xl font-bold">Make the first account</h1>
      <p className="mt-3">
        It administers this installation. Projects it sees only where it is a member, like everybody else.
      </p>
      <FirstAccountForm action={makeFirstAccount} />
      {hasDemo && (
        <p className="mt-8 border-t pt-4">
          Only looking around?{" "}
          <Link href="/sign-in" className="link font-semibold">
            Sign in with a demo account
          </Link>
        </p>
      )}
    </>
  );
}
