import type { ReactNode } from "react";
import { openSession } from "@/lib/auth/page-gate";

// Asks who is there and draws nothing: a project's pages and the others have different headers. No Suspense and no
// loading.tsx here or above, or a refused page would answer 200.
export default async function SignedInLayout({ children }: { readonly children: ReactNode }) {
  await openSession();
  return children;
}
