import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { fileNumber, folderNumber, isDcfFileName, unwrapCounter } from "./file-number";

describe("names by the DCF rule", () => {
  // check-values.md E37 (CIPA DC-009).
  test.each([
    ["ABCD0001", true],
    ["_ABC9999", true],
    ["ABCD0000", false],
    ["ABC0001", false],
    ["AB-D0001", false],
  ])("%s: %s", (name, isValid) => expect(isDcfFileName(name)).toBe(isValid));

  test("folders have three digits from 100 on and five characters", () => {
    expect(folderNumber("DCIM/100ABCDE")).toBe(100);
    expect(folderNumber("099ABCDE")).toBeNull();
    expect(folderNumber("100ABCD")).toBeNull();
    expect(folderNumber(null)).toBeNull();
  });
});

describe("fileNumber", () => {
  test.each([
    ["HARB0042", 42, 9999],
    ["KITE_0018", 18, 9999],
    // Four free characters may be digits.
    ["A1230001", 1, 9999],
    ["frame 7", 7, 9],
    ["IMG_20260501_101112", 101112, 999999],
    ["picture-12-edited", 12, 99],
  ])("%s is number %i", (name, number, period) => {
    expect(fileNumber(name)).toMatchObject({ number, period });
  });

  test("a name without digits has none", () => expect(fileNumber("cat")).toBeNull());

  test("dots are part of a name", () => expect(fileNumber("tile.v2")).toMatchObject({ prefix: "tile.v#", number: 2 }));
});

describe("unwrapCounter", () => {
  test("a roll-over into the next number space", () => {
    expect(unwrapCounter([9998, 9999, 1, 3], 9999)).toEqual([9998, 9999, 10000, 10002]);
  });

  test("missing numbers are no roll-over", () => {
    expect(unwrapCounter([5, 900, 2000], 9999)).toEqual([5, 900, 2000]);
  });

  test("shifting a counter by a constant, roll-over included, keeps the order", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 4000 }), fc.integer({ min: 0, max: 9998 }), (count, offset) => {
        const shifted = Array.from({ length: count }, (_, at) => ((at + offset) % 9999) + 1);
        const unwrapped = unwrapCounter(shifted, 9999);
        return unwrapped.every((number, at) => at === 0 || number === (unwrapped[at - 1] ?? 0) + 1);
      }),
    );
  });
});
