import { expect, test } from "vitest";
import { bytesText, countOf, distanceText, exposureText, groupDigits, pauseText, percent } from "@/lib/board/words";

test("a number of things is said as things", () => {
  expect([countOf(0, "question"), countOf(1, "question"), countOf(3, "question"), countOf(6000, "frame")]).toEqual([
    "no questions",
    "1 question",
    "3 questions",
    "6 000 frames",
  ]);
});

test("pauses read as a person would say them", () => {
  expect([0.42, 2, 9.96, 59.6, 130, 3600, 3840].map(pauseText)).toEqual([
    "0.4 s",
    "2 s",
    "10 s",
    "1 min",
    "2 min 10 s",
    "1 h",
    "1 h 4 min",
  ]);
  expect(pauseText(null)).toBe("pause unknown");
});

test("exposure times are fractions while they are short", () => {
  // Common practice: cameras show 1/250, 1/4 and from 0.3 s on decimals.
  expect([1 / 250, 0.25, 0.3, 0.5, 1.3, 30].map(exposureText)).toEqual([
    "1/250 s",
    "1/4 s",
    "1/3 s",
    "0.5 s",
    "1.3 s",
    "30 s",
  ]);
});

test("figures carry their units and group their thousands", () => {
  expect(groupDigits(1_234_567)).toBe("1 234 567");
  expect(percent(0.333)).toBe("33 %");
  expect(percent(null)).toBe("not measured");
  // 3-4-5 triangle.
  expect(distanceText({ xPx: 3000, yPx: 4000 })).toBe("5 000 px");
  // SI prefixes: powers of ten.
  expect([0, 999, 1000, 7_400_000, 123_456_789, 2_000_000_000].map(bytesText)).toEqual([
    "0 B",
    "999 B",
    "1.0 kB",
    "7.4 MB",
    "123 MB",
    "2.0 GB",
  ]);
});
