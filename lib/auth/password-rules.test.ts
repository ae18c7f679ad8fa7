import { expect, test } from "vitest";
import { PASSWORD_MOST, passwordProblem } from "@/lib/auth/password-rules";

const ABOUT = ["ada.lane@harbour-studio.example", "Ada Lane"];

test.each([
  "harbour lantern violet spoon",
  // No composition rules: all lower case, no digits.
  "gravelwindmillsuppertrombone",
  // Any characters: NIST SP 800-63B counts a Unicode code point as one.
  "широкие паруса над морем",
  "海辺の写真家は朝に霧を撮る人だよ",
  "🐟🚲🌂🧅🪜🎺🧭🪵🫖🧤🪁🥄🧶🪴🐌",
  "{#(&+/?=<*~^%;:.",
  // The demo's.
  "a-harbour-at-low-tide",
])("%j may be used", (password) => {
  expect(passwordProblem(password, ABOUT)).toBeNull();
});

test("14 code points are too few and 15 are enough, whatever their length in UTF-16", () => {
  // NIST SP 800-63B-4: 15 characters where the password is the only factor; a code point counts one.
  const fifteen = [..."🐟🚲🌂🧅🪜🎺🧭🪵🫖🧤🪁🥄🧶🪴🐌"];
  expect(fifteen).toHaveLength(15);
  expect(passwordProblem(fifteen.join(""), ABOUT)).toBeNull();
  expect(passwordProblem(fifteen.slice(1).join(""), ABOUT)).toMatch(/at least 15 characters; this has 14/);
});

test("length is counted after NFKC", () => {
  // U+FB03 is the ligature ffi: one code point, three after NFKC (Unicode Standard Annex 15).
  expect(passwordProblem("\uFB03 gravel wind", ABOUT)).toBeNull();
});

test("64 characters and more are possible, and there is an end", () => {
  const words = "gravel windmill supper trombone ";
  expect(passwordProblem(words.repeat(1) + "oyster candle bridge", ABOUT)).toBeNull();
  const long = Array.from({ length: PASSWORD_MOST }, (_, index) => String.fromCodePoint(0x4e00 + index * 7)).join("");
  expect(passwordProblem(long, ABOUT)).toBeNull();
  expect(passwordProblem(`${long}x`, ABOUT)).toMatch(/at most 256/);
});

// The commonest of 15 characters and more in published lists of leaked passwords (from memory and from
// @zxcvbn-ts/language-common 4.1.3), and the same with the usual dressing.
test.each([
  "123456789012345",
  "1234567890123456",
  "0987654321098765",
  "aaaaaaaaaaaaaaa",
  "               ",
  "!?!?!?!?!?!?!?!?",
  "abcabcabcabcabc",
  "passwordpassword",
  "PasswordPassword1!",
  "p@ssw0rdp@ssw0rd",
  "password-password",
  "password12345678",
  "qwertyuiopasdfgh",
  "qwertyuiop123456",
  "1qaz2wsx3edc4rfv",
  "1q2w3e4r5t6y7u8i",
  "q1w2e3r4t5y6u7i8",
  "abcdefghijklmnop",
  "zyxwvutsrqponmlk",
  "iloveyouiloveyou",
  "iloveyouforever1",
  "letmeinletmein123",
  "correct horse battery staple",
  "CorrectHorseBatteryStaple",
  "stackyardstackyard",
  "Stackyard-2026-2026",
  "welcometostackyard",
  "ada.lane@harbour-studio.example",
  "adalaneadalane123",
  "Ada Lane 1234567890",
  "hd764nw5d7e1vb1",
])("%j is refused as one of the first to be guessed", (password) => {
  expect(passwordProblem(password, ABOUT)).toMatch(/guessed first/);
});
