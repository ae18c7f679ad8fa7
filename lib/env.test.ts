import path from "node:path";
import { expect, test } from "vitest";
import { parseEnvironment } from "@/lib/env";

test("without any variable the product listens on this machine only and keeps everything in storage/", () => {
  const storageDir = path.resolve("storage");
  expect(parseEnvironment({})).toMatchObject({
    port: 3000,
    host: "127.0.0.1",
    appUrl: "http://127.0.0.1:3000",
    storageDir,
    databaseUrl: `file:${path.join(storageDir, "stackyard.db")}`,
    authSecret: null,
    storageReserveBytes: 1024 * 1024 * 1024,
  });
});

test("empty variables count as absent", () => {
  expect(parseEnvironment({ PORT: "", APP_URL: "", AUTH_SECRET: "" })).toEqual(parseEnvironment({}));
});

test.each([
  [{ PORT: "8080" }, "http://127.0.0.1:8080"],
  // Every interface is no address that a browser could open.
  [{ HOST: "0.0.0.0" }, "http://localhost:3000"],
  [{ HOST: "::" }, "http://localhost:3000"],
  // RFC 3986, 3.2.2: an IPv6 address stands in brackets.
  [{ HOST: "::1" }, "http://[::1]:3000"],
  [{ HOST: "yard" }, "http://yard:3000"],
  [{ APP_URL: "https://yard.example/" }, "https://yard.example"],
])("%j has the address %s", (source, appUrl) => {
  expect(parseEnvironment(source).appUrl).toBe(appUrl);
});

test("what is wrong is named", () => {
  expect(() => parseEnvironment({ PORT: "70000", APP_URL: "yard" })).toThrow(/PORT[\s\S]*APP_URL|APP_URL[\s\S]*PORT/);
  expect(() => parseEnvironment({ AUTH_SECRET: "short" })).toThrow(/AUTH_SECRET/);
});
