import { expect, test } from "vitest";
import { signInMessage, waitError } from "@/lib/auth/sign-in-message";

test.each([
  [899.2, "15 minutes"],
  [61, "2 minutes"],
  [60, "1 minute"],
  [59, "59 seconds"],
  [0.2, "1 second"],
])("a wait of %d s reads %s", (seconds, words) => {
  expect(signInMessage(waitError(seconds))).toContain(`Try again in ${words}.`);
});

test("an error made up by somebody else's link is never shown", () => {
  expect(signInMessage("Call 555 0100 now")).not.toContain("555");
  expect(signInMessage("wait-<b>")).not.toContain("<b>");
});
