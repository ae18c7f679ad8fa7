import { signIn } from "next-auth/react";
import { signInMessage } from "@/lib/auth/sign-in-message";

export interface SignInAttempt {
  readonly email: string;
  readonly password: string;
  /** Already checked: a path of this site. */
  readonly returnPath: string;
}

/**
 * Signs in and leaves for `returnPath` with a full load, so that nothing rendered before stays on screen.
 * @returns why it did not work, in plain words; null while the browser leaves
 */
export async function signInAndLeave({ email, password, returnPath }: SignInAttempt): Promise<string | null> {
  try {
    const result = await signIn("credentials", { email, password, redirect: false, callbackUrl: returnPath });
    if (!result) return signInMessage("unknown");
    if (!result.ok || result.error) return signInMessage(result.error ?? "unknown");
    window.location.assign(returnPath);
    return null;
  } catch {
    return "No answer from the server. Check the connection and try again.";
  }
}
