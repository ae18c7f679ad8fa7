import { expect, test } from "vitest";
import { asPerCent, countOf, formatBytes, groupDigits } from "@/components/ui/format";

// Prefixes: SI brochure, 9th edition, table 7 (kilo is 1 000), from memory.
test.each([
  [0, "0 bytes"],
  [999, "999 bytes"],
  [1000, "1.0 kB"],
  [9949, "9.9 kB"],
  [9950, "10 kB"],
  [999_499, "999 kB"],
  [999_500, "1.0 MB"],
  [3_200_000_000, "3.2 GB"],
  [12_000_000_000_000_000, "12000 TB"],
])("%d bytes are written %s", (bytes, text) => {
  expect(formatBytes(bytes)).toBe(text);
});

test("a number of things is said as things", () => {
  expect([countOf(0, "question"), countOf(1, "question"), countOf(3, "question")]).toEqual([
    "0 questions",
    "1 question",
    "3 questions",
  ]);
});

test("thousands are parted from five digits on", () => {
  expect([groupDigits(9999), groupDigits(12400), groupDigits(1234567)]).toEqual([
    "9999",
    "12\u202f400",
    "1\u202f234\u202f567",
  ]);
});

test("a fraction is shown in per cent without the noise of binary fractions", () => {
  expect([asPerCent(0.33), asPerCent(0.07), asPerCent(0.255)]).toEqual(["33", "7", "25.5"]);
});
