import type { Metadata } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { DemoAccounts } from "@/components/account/demo-accounts";
import { SignInForm } from "@/components/account/sign-in-form";
import { Notice } from "@/components/ui/notice";
import { safeReturnPath } from "@/lib/auth/return-path";
import { findSession } from "@/lib/auth/session";
import { signInMessage } from "@/lib/auth/sign-in-message";
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from "@/lib/demo/accounts";
import { isFirstAccountOpen, listDemoAccounts } from "@/lib/people/reads";

export const metadata: Metadata = { title: "Sign in" };

type Query = Promise<Record<string, string | string[] | undefined>>;

export default async function SignInPage({ searchParams }: { readonly searchParams: Query }) {
  const query = await searchParams;
  const returnPath = safeReturnPath(single(query.to));
  if (await findSession()) redirect(returnPath);
  const [isFirstOpen, demoEmails] = await Promise.all([isFirstAccountOpen(), listDemoAccounts()]);
  if (isFirstOpen && demoEmails.length === 0) redirect("/first-account");
  const present = new Set(demoEmails.map((account) => account.email));
  const demo = DEMO_ACCOUNTS.filter((account) => present.has(account.email));
  const error = single(query.error);
  return (
    <>
      <h1 className="text-3xl font-bold">Sign in</h1>
      <div className="mt-4 space-y-4 empty:hidden">
        {query.ended !== undefined && (
          <Notice title="Your session has ended.">Sign in again and you are back where you were.</Notice>
        )}
        {query.out !== undefined && <Notice title="You are signed out." />}
        {error !== undefined && <Notice tone="madder" title={signInMessage(error)} />}
      </div>
      <SignInForm returnPath={returnPath} />
      {demo.length > 0 && <DemoAccounts accounts={demo} password={DEMO_PASSWORD} returnPath={returnPath} />}
      {isFirstOpen && (
        <p className="mt-8 border-t pt-4">
          Nobody has an account of their own here yet.{" "}
          <Link href="/first-account" className="link font-semibold">
            Make the first account
          </Link>
        </p>
      )}
    </>
  );
}

function single(value: string | string[] | undefined): string | undefined {
  return Array.isArray(value) ? value[0] : value;
}
