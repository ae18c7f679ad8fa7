import NextAuth from "next-auth";
import type { NextRequest } from "next/server";
import { authOptions } from "@/lib/auth/config";

interface Context {
  readonly params: Promise<{ nextauth: string[] }>;
}

function handler(request: NextRequest, context: Context): Promise<Response> {
  return NextAuth(request, context, authOptions());
}

export { handler as GET, handler as POST };
