/** What next-auth's sign-in hands back as `error`: the form turns it into words with `signInMessage`. */
const WAIT = /^wait-(\d{1,5})$/;

export function waitError(seconds: number): string {
  return `wait-${Math.max(1, Math.ceil(seconds))}`;
}

/** Plain words for a refused sign-in; an unknown code gets the general sentence, never its own text. */
export function signInMessage(error: string): string {
  const seconds = WAIT.exec(error)?.[1];
  if (seconds !== undefined) {
    return `Too many wrong passwords for this account. Try again in ${describeWait(Number(seconds))}.`;
  }
  if (error === "CredentialsSignin") {
    return "This e-mail and password do not belong together, or the account is disabled.";
  }
  return "Signing in did not work. Reload this page and try again.";
}

function describeWait(seconds: number): string {
  if (seconds < 60) return seconds === 1 ? "1 second" : `${seconds} seconds`;
  const minutes = Math.ceil(seconds / 60);
  return minutes === 1 ? "1 minute" : `${minutes} minutes`;
}
