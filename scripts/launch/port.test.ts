import { createServer } from "node:net";
import { expect, test } from "vitest";
import { claimPort, localAddress } from "./port";

test("0 gives a free port that can then be listened on", async () => {
  const port = await claimPort(0, "127.0.0.1");
  expect(port).toBeGreaterThan(0);
  expect(await claimPort(port, "127.0.0.1")).toBe(port);
});

test("a taken port is one line that says what to do", async () => {
  const port = await claimPort(0, "127.0.0.1");
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(port, "127.0.0.1", resolve));
  await expect(claimPort(port, "127.0.0.1")).rejects.toThrow(
    `Port ${port} on 127.0.0.1 is already in use. Stop what uses it, or choose another port: PORT=${port + 1} npm run launch`,
  );
  await new Promise((resolve) => server.close(resolve));
});

test("an address that is not this machine's is named", async () => {
  // 192.0.2.0/24 is set aside for documentation: no machine has it (RFC 5737).
  await expect(claimPort(0, "192.0.2.1")).rejects.toThrow("This machine has no address 192.0.2.1");
});

test("a server on every address is reached on the loopback address", () => {
  expect(localAddress("0.0.0.0", 80)).toBe("http://127.0.0.1:80");
  expect(localAddress("::", 80)).toBe("http://[::1]:80");
  expect(localAddress("::1", 80)).toBe("http://[::1]:80");
  expect(localAddress("192.0.2.1", 3000)).toBe("http://192.0.2.1:3000");
});
