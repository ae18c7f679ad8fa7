import type { ReactNode } from "react";
import { UploadsProvider } from "@/components/intake/uploads-provider";
import { openSession } from "@/lib/auth/page-gate";

// Asks who is there and draws nothing (uploads live here, so that they go on from page to page): a project's pages and the others have different headers. No Suspense and no
// loading.tsx here or above, or a refused page would answer 200.
export default async function SignedInLayout({ children }: { readonly children: ReactNode }) {
  await openSession();
  return <UploadsProvider>{children}</UploadsProvider>;
}
