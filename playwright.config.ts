import { mkdtempSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { defineConfig } from "@playwright/test";
import { claimPort } from "./scripts/launch/port";

// This file is read again in every test process: what is made once is handed on in the environment.
process.env.E2E_PORT ??= String(await claimPort(0, "127.0.0.1"));
process.env.E2E_STORAGE_DIR ??= mkdtempSync(path.join(tmpdir(), "stackyard-e2e-"));

const address = `http://127.0.0.1:${process.env.E2E_PORT}`;

/** End-to-end tests: Debian's Chromium on the production build, started as people start it, with storage of its own. */
export default defineConfig({
  testDir: "tests/e2e",
  outputDir: "test-results",
  globalTeardown: "./tests/e2e/support/remove-storage.ts",
  // One product and one worker on two processors: tests beside each other would only wait for one another.
  workers: 1,
  // Retrying would hide what fails now and then.
  retries: 0,
  timeout: 180_000,
  expect: { timeout: 15_000 },
  reporter: "list",
  use: {
    baseURL: address,
    browserName: "chromium",
    viewport: { width: 1440, height: 900 },
    trace: "retain-on-failure",
    launchOptions: {
      executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium",
      args: [
        "--no-sandbox",
        "--disable-gpu",
        "--disable-quic",
        "--no-first-run",
        "--disable-background-networking",
        "--disable-component-update",
        "--disable-sync",
      ],
    },
  },
  projects: [
    // The first account can be made once: it comes first, and the others sign in with it.
    { name: "first account", testMatch: "first-account.setup.ts" },
    { name: "product", testMatch: "*.spec.ts", dependencies: ["first account"] },
  ],
  webServer: {
    command: "node scripts/launch.mjs --no-demo",
    url: `${address}/api/health`,
    env: { PORT: process.env.E2E_PORT, HOST: "127.0.0.1", STORAGE_DIR: process.env.E2E_STORAGE_DIR },
    timeout: 300_000,
    gracefulShutdown: { signal: "SIGTERM", timeout: 25_000 },
    stdout: "ignore",
    stderr: "pipe",
  },
});
