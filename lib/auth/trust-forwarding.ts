import "server-only";
import { subscribe } from "node:diagnostics_channel";
import type { IncomingMessage } from "node:http";
import { trustedAddress } from "@/lib/auth/client-address";
import { environment } from "@/lib/env";

/**
 * Replaces `X-Forwarded-For` of every request by the one address to believe, before anything reads it: Next keeps what
 * the client wrote there, and hands no socket to route handlers. Node.js announces each request on this channel first.
 */
export function trustForwarding(): void {
  const isBehindProxy = environment().appUrl.startsWith("https://");
  subscribe("http.server.request.start", (message) => {
    const { request } = message as { readonly request: IncomingMessage };
    const forwarded = request.headers["x-forwarded-for"];
    const text = Array.isArray(forwarded) ? forwarded.join(",") : forwarded;
    const address = trustedAddress(text, request.socket.remoteAddress ?? "unknown", isBehindProxy);
    request.headers["x-forwarded-for"] = address;
  });
}
