import { expect, test } from "vitest";
import { singleLineSchema } from "@/lib/text/single-line";

const schema = singleLineSchema(10);

test.each([
  ["  Harbour  ", "Harbour"],
  ["Hä / “1”", "Hä / “1”"],
  ["👩‍👩‍👧 ok", "👩‍👩‍👧 ok"],
  ["港", "港"],
  ["..", ".."],
  // NFC (Unicode Standard Annex 15): e and a combining acute become one character.
  ["cafe\u0301", "café"],
])("%j becomes %j", (text, expected) => {
  expect(schema.parse(text)).toBe(expected);
});

test("length is counted in code points after trimming", () => {
  expect(schema.parse(` ${"🐟".repeat(10)} `)).toBe("🐟".repeat(10));
  expect(schema.safeParse("🐟".repeat(11)).success).toBe(false);
});

test.each([
  ["", "visible"],
  ["   ", "visible"],
  ["\u200B", "visible"],
  ["\u200F", "visible"],
  ["two\nlines", "line breaks"],
  ["nul\0", "control"],
  ["tab\tbed", "control"],
  // The characters of "Trojan Source" (CVE-2021-42574): embeddings, overrides, isolates.
  ["a\u202Eb", "direction"],
  ["a\u2066b", "direction"],
  ["a\uD800", "control"],
  [7, "give a text"],
])("%j is refused", (text, message) => {
  const parsed = schema.safeParse(text);
  expect(parsed.error?.issues.map((issue) => issue.message).join()).toContain(message);
});
