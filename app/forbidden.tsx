import type { Metadata } from "next";
import { Failure } from "@/components/shell/failure";
import { PageFrame } from "@/components/shell/page-frame";
import { findSession } from "@/lib/auth/session";

export const metadata: Metadata = { title: "Not for your role" };

export default async function Forbidden() {
  return (
    <PageFrame person={await findSession()}>
      <Failure title="Your account may not open this page">
        <p>Ask the administrator of this installation.</p>
      </Failure>
    </PageFrame>
  );
}
