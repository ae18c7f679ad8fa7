/**
 * The address a request came from, for counting failed sign-ins. `trustForwarding` (called once, when the web process
 * starts) has replaced what the client may have written into `X-Forwarded-For`.
 */
export function addressOf(headers: Readonly<Record<string, unknown>>): string {
  const forwarded = headers["x-forwarded-for"];
  return typeof forwarded === "string" && forwarded !== "" ? forwarded : "unknown";
}

/**
 * The one address to believe. Behind HTTPS there is a proxy (this program speaks HTTP only), which appends the address
 * it was called from: the last entry is its word, the ones before are the client's. Without a proxy only the socket counts.
 */
export function trustedAddress(forwarded: string | undefined, socketAddress: string, isBehindProxy: boolean): string {
  const last = forwarded?.split(",").at(-1)?.trim();
  return isBehindProxy && last ? last : socketAddress;
}
