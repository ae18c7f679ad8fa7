import NextAuth from "next-auth";
import { NextRequest } from "next/server";
import { z } from "zod";
import { authOptions } from "@/lib/auth/config";
import { readText } from "@/lib/http/read-json";
import { route } from "@/lib/http/route";

/** Far more than e-mail, password and an address to go to. next-auth would read whatever anybody sends. */
const MAX_BODY_BYTES = 16 * 1024;

const paramsSchema = z.object({ nextauth: z.array(z.string()) });

const handler = route(paramsSchema, async (request, params) => {
  const { url, method, headers } = request;
  const body = method === "POST" ? await readText(request, MAX_BODY_BYTES) : undefined;
  return NextAuth(new NextRequest(url, { method, headers, body }), { params: Promise.resolve(params) }, authOptions());
});

export { handler as GET, handler as POST };
