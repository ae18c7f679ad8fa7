import "server-only";
import type { NextAuthOptions } from "next-auth";
import CredentialsProvider from "next-auth/providers/credentials";
import { addressOf } from "@/lib/auth/client-address";
import { createSession, removeSession, SESSION_SECONDS } from "@/lib/auth/sessions";
import { tryPassword } from "@/lib/auth/sign-in";
import { waitError } from "@/lib/auth/sign-in-message";
import { environment, followAppUrl } from "@/lib/env";
import { withoutParameters } from "@/lib/errors/logs";
import { sessionIdSchema } from "@/lib/ids";
import { emailSchema } from "@/lib/people/schema";
import { authSecret } from "@/lib/storage/auth-secret";

/** Made on the first request, not when the module loads: the build loads it too, with no storage. */
export function authOptions(): NextAuthOptions {
  followAppUrl();
  return {
    secret: authSecret(),
    session: { strategy: "jwt", maxAge: SESSION_SECONDS },
    useSecureCookies: environment().appUrl.startsWith("https://"),
    // signOut: only where somebody types next-auth's own address of it; the account page has the button.
    pages: { signIn: "/sign-in", error: "/sign-in", signOut: "/account" },
    providers: [
      CredentialsProvider({
        credentials: { email: { type: "email" }, password: { type: "password" } },
        // next-auth hands the message of what is thrown to the browser, in an address.
        authorize: (credentials, request) =>
          authorize(credentials, request.headers ?? {}).catch((error: unknown) => {
            throw withoutParameters(error);
          }),
      }),
    ],
    callbacks: {
      // The cookie holds the session's id and nothing else: who it is and what they may do is asked of the database.
      jwt: ({ token, user }) => (user ? { sessionId: user.id } : { sessionId: token.sessionId }),
      session: ({ session }) => ({ expires: session.expires }),
    },
    events: {
      signOut: async ({ token }) => {
        const id = sessionIdSchema.safeParse(token?.sessionId);
        if (id.success) await removeSession(id.data);
      },
    },
  };
}

type Credentials = Partial<Record<"email" | "password", unknown>> | undefined;

/** @returns as next-auth's "user" the new session; null: refused. Throws only what `signInMessage` understands. */
async function authorize(credentials: Credentials, headers: Record<string, unknown>): Promise<{ id: string } | null> {
  const email = emailSchema.safeParse(credentials?.email);
  const password = credentials?.password;
  if (!email.success || typeof password !== "string") return null;
  const outcome = await tryPassword({ email: email.data, password, address: addressOf(headers) });
  if (outcome.kind === "wait") throw new Error(waitError(outcome.seconds));
  if (outcome.kind === "wrong") return null;
  const device = headers["user-agent"];
  return { id: await createSession(outcome.userId, typeof device === "string" ? device : "") };
}
