import { expect, test } from "vitest";
import { addressOf, trustedAddress } from "@/lib/auth/client-address";

test("without a proxy only the socket's address counts, whatever the client writes", () => {
  expect(trustedAddress("203.0.113.9", "198.51.100.7", false)).toBe("198.51.100.7");
  expect(trustedAddress(undefined, "198.51.100.7", false)).toBe("198.51.100.7");
});

test("behind a proxy its own entry counts: the last one", () => {
  expect(trustedAddress("10.0.0.1, 203.0.113.9", "127.0.0.1", true)).toBe("203.0.113.9");
  expect(trustedAddress("203.0.113.9", "127.0.0.1", true)).toBe("203.0.113.9");
  expect(trustedAddress(undefined, "127.0.0.1", true)).toBe("127.0.0.1");
  expect(trustedAddress(" , ", "127.0.0.1", true)).toBe("127.0.0.1");
});

test("a request without an address is counted with all of its kind", () => {
  expect(addressOf({})).toBe("unknown");
  expect(addressOf({ "x-forwarded-for": "198.51.100.7" })).toBe("198.51.100.7");
});
