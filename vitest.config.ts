import { fileURLToPath } from "node:url";
import react from "@vitejs/plugin-react";
import { defineConfig } from "vitest/config";

const root = fileURLToPath(new URL(".", import.meta.url));

export default defineConfig({
  plugins: [react()],
  resolve: {
    alias: {
      "@/": root,
      // Throws outside Next's server bundle; the code under test runs on plain Node.js.
      "server-only": fileURLToPath(new URL("tests/support/empty-module.ts", import.meta.url)),
    },
  },
  test: {
    include: ["{app,components,lib,db,tests,scripts}/**/*.test.{ts,tsx}"],
    exclude: ["tests/e2e/**", "node_modules/**"],
    // An odd offset: code that leans on the machine's zone fails here. The address is not the caller's: tests name it.
    env: { TZ: "Asia/Kathmandu", PORT: "3000", HOST: "127.0.0.1" },
    setupFiles: ["tests/support/setup.ts"],
    testTimeout: 60_000,
    hookTimeout: 60_000,
    pool: "forks",
  },
});
