import { afterEach, beforeEach, expect, vi } from "vitest";

// An error on the console is a failure unless the test says that it expects it (by mocking console.error itself).
let logged: unknown[][] = [];

beforeEach(() => {
  logged = [];
  vi.spyOn(console, "error").mockImplementation((...args) => {
    logged.push(args);
  });
});

afterEach(() => {
  expect(logged, "console.error was called").toEqual([]);
  vi.restoreAllMocks();
});
