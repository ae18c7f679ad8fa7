/** Set by the proxy on every page request: the path and query asked for, so that sign-in can lead back to it. */
export const PATH_HEADER = "x-stackyard-path";

/** Where signing in leads when nothing else was asked for. */
const HOME = "/projects";

/**
 * The address to go to after signing in: a path of this site, or the project list. Anything that a browser could read
 * as another site (`//host`, `/\host`, a scheme, control characters) counts as absent, and so do the API and sign-in.
 */
export function safeReturnPath(value: string | null | undefined): string {
  if (!value || !value.startsWith("/") || /[\\\p{Cc}]/u.test(value)) return HOME;
  // The base is a name nothing resolves; only what stays on it is a path of this site.
  const base = "http://stackyard.invalid";
  if (!URL.canParse(value, base)) return HOME;
  const url = new URL(value, base);
  if (url.origin !== base || /^\/(api|sign-in|first-account)(\/|$)/.test(url.pathname)) return HOME;
  // A path that begins with two slashes after normalising would name another host.
  return url.pathname.startsWith("//") ? HOME : url.pathname + url.search + url.hash;
}
