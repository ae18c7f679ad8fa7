import { NextResponse, type NextRequest } from "next/server";
import { PATH_HEADER } from "@/lib/auth/return-path";

/** Tells a page which address was asked for, so that sign-in can lead back to it. It decides nothing: the gate does. */
export function proxy(request: NextRequest): NextResponse {
  const headers = new Headers(request.headers);
  headers.set(PATH_HEADER, request.nextUrl.pathname + request.nextUrl.search);
  return NextResponse.next({ request: { headers } });
}

// The whole of /api stays out: a proxy truncates large bodies silently (10 MB of an upload's 50).
export const config = { matcher: ["/((?!api/|_next/|.*\\.[a-z0-9]+$).*)"] };
