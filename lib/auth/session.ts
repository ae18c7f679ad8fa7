import "server-only";
import type { SignedInUser } from "@/lib/auth/gate";

/** The signed-in person of this request, from the session id in the cookie, looked up in the database. */
export async function findSession(): Promise<SignedInUser | null> {
  throw new Error("helper accounts: not written yet");
}
