import { createServer } from "node:net";

/**
 * The port to listen on: the one asked for where it is free, any free one where 0 is asked for.
 * @throws Error in one plain line where it cannot be had
 */
export async function claimPort(port: number, host: string): Promise<number> {
  const server = createServer();
  try {
    return await new Promise<number>((resolve, reject) => {
      server.once("error", reject);
      server.listen(port, host, () => {
        const address = server.address();
        resolve(typeof address === "object" && address ? address.port : port);
      });
    });
  } catch (cause) {
    throw new Error(explain(cause, port, host), { cause });
  } finally {
    server.close();
  }
}

function explain(cause: unknown, port: number, host: string): string {
  const code = cause instanceof Error && "code" in cause ? cause.code : undefined;
  const other = `or choose another port: PORT=${port + 1} npm run launch`;
  if (code === "EADDRINUSE") return `Port ${port} on ${host} is already in use. Stop what uses it, ${other}`;
  if (code === "EACCES") return `This account may not listen on port ${port}. Choose one above 1023, ${other.slice(3)}`;
  if (code === "EADDRNOTAVAIL" || code === "ENOTFOUND") return `This machine has no address ${host} (HOST).`;
  return `Cannot listen on ${host}, port ${port}: ${String(cause)}`;
}

/** Where a program on this machine reaches a server that listens on `host`. */
export function localAddress(host: string, port: number): string {
  if (host === "0.0.0.0") return `http://127.0.0.1:${port}`;
  if (host === "::") return `http://[::1]:${port}`;
  return `http://${host.includes(":") ? `[${host}]` : host}:${port}`;
}
