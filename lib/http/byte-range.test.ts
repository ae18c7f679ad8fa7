import { expect, test } from "vitest";
import { readByteRange } from "./byte-range";

test.each([
  // RFC 9110, 14.1.2: examples on a representation of 10 000 bytes.
  ["bytes=0-499", 10_000, { first: 0, last: 499 }],
  ["bytes=500-999", 10_000, { first: 500, last: 999 }],
  ["bytes=-500", 10_000, { first: 9500, last: 9999 }],
  ["bytes=9500-", 10_000, { first: 9500, last: 9999 }],
  // "If the selected representation is shorter than the specified suffix-length, the entire representation is used."
  ["bytes=-20000", 10_000, { first: 0, last: 9999 }],
  // "... or the value is greater than or equal to the current length ...: the remainder of the representation".
  ["bytes=0-99999", 10_000, { first: 0, last: 9999 }],
  // Range units are case-insensitive (14.1).
  ["Bytes=0-0", 10_000, { first: 0, last: 0 }],
])("%s of %i bytes", (header, size, range) => {
  expect(readByteRange(header, size)).toEqual(range);
});

test.each(["bytes=10000-", "bytes=10000-10001", "bytes=-0"])("%s of 10 000 bytes cannot be satisfied", (header) => {
  expect(readByteRange(header, 10_000)).toBe("unsatisfiable");
});

test("nothing of an empty file can be asked for", () => {
  expect(readByteRange("bytes=0-", 0)).toBe("unsatisfiable");
  expect(readByteRange("bytes=-1", 0)).toBe("unsatisfiable");
});

// "A server MAY ignore the Range header field"; an invalid one and one of an unknown unit are ignored (14.2).
test.each([null, "", "bytes=", "bytes=-", "bytes=5-2", "bytes=a-b", "lines=0-5", "bytes=0-1,5-6"])(
  "%s is answered with all of it",
  (header) => {
    expect(readByteRange(header, 10_000)).toBeNull();
  },
);
