import { expect, test } from "vitest";
import { safeReturnPath } from "@/lib/auth/return-path";

test("a path of this site is kept with its query and fragment", () => {
  expect(safeReturnPath("/projects/p1/board?tile=A3#bench")).toBe("/projects/p1/board?tile=A3#bench");
});

// The refused ones: OWASP Unvalidated Redirects and Forwards Cheat Sheet, and the URL standard's treatment of
// backslashes, tabs and newlines in special schemes (url.spec.whatwg.org, 4.4), from memory.
test.each([
  undefined,
  null,
  "",
  "projects",
  "https://elsewhere.example/",
  "//elsewhere.example/",
  "/\\elsewhere.example/",
  "/\t/elsewhere.example/",
  "/\n/elsewhere.example",
  "/.//elsewhere.example/",
  "/x/..//elsewhere.example",
  "javascript:alert(1)",
  "/api/projects",
  "/sign-in?to=/projects",
  "/first-account",
])("%j leads to the project list", (value) => {
  expect(safeReturnPath(value)).toBe("/projects");
});
