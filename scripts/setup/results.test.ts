import { expect, test } from "vitest";
import { addTotals, countPlaywright, countVitest } from "./results.mjs";

test("vitest: passed, failed and skipped tests are counted, a file that cannot be loaded as a failure", () => {
  const report = {
    testResults: [
      {
        status: "failed",
        assertionResults: [
          { status: "passed", fullName: "a" },
          { status: "failed", fullName: "b" },
          { status: "skipped", fullName: "c without shared data" },
          { status: "pending", fullName: "d" },
        ],
      },
      { status: "failed", assertionResults: [] },
      { status: "passed", assertionResults: [] },
    ],
  };
  expect(countVitest(report)).toEqual({ passed: 1, failed: 2, skipped: ["c without shared data", "d"] });
});

test("Playwright: nested suites are counted; flaky and unexpected tests and global errors are failures", () => {
  const spec = (title: string, status: string) => ({ title, tests: [{ status }] });
  const report = {
    errors: [{ message: "the server did not start" }],
    suites: [
      {
        title: "board.spec.ts",
        specs: [spec("a", "expected"), spec("b", "flaky")],
        suites: [{ title: "in the dark", specs: [spec("c", "unexpected"), spec("d", "skipped")] }],
      },
    ],
  };
  expect(countPlaywright(report)).toEqual({ passed: 1, failed: 3, skipped: ["board.spec.ts > in the dark > d"] });
});

test("totals are added and skipped names kept", () => {
  const parts = [
    { passed: 2, failed: 0, skipped: ["a"] },
    { passed: 3, failed: 1, skipped: ["b"] },
  ];
  expect(addTotals(parts)).toEqual({ passed: 5, failed: 1, skipped: ["a", "b"] });
});
