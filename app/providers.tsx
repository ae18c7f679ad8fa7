"use client";

import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { useState, type ReactNode } from "react";

// Pages render from the server's data; asking again at once would double every first load.
const STALE_AFTER_MS = 5_000;

/** What every client component may rely on. */
export function Providers({ children }: { readonly children: ReactNode }) {
  const [client] = useState(() => new QueryClient({ defaultOptions: { queries: { staleTime: STALE_AFTER_MS } } }));
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>;
}
