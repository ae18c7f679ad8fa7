import type { Metadata } from "next";
import { Failure } from "@/components/shell/failure";
import { PageFrame } from "@/components/shell/page-frame";
import { findSession } from "@/lib/auth/session";

export const metadata: Metadata = { title: "Nothing here" };

export default async function NotFound() {
  return (
    <PageFrame person={await findSession()}>
      <Failure title="There is nothing at this address">
        <p>
          It may be mistyped, or what was here is deleted. A project is also hidden from everybody who is not in it.
        </p>
      </Failure>
    </PageFrame>
  );
}
