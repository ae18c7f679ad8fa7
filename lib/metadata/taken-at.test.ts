import { describe, expect, test } from "vitest";

import { parseTakenAt } from "@/lib/metadata/taken-at";

const read = (dateTime: string | null, subSecond: string | null = null, offset: string | null = null) =>
  parseTakenAt({ dateTime, subSecond, offset });

describe("parseTakenAt", () => {
  test("local time, fraction and offset are kept apart", () => {
    // check-values.md E34 (Exif 2.31; RFC 3339): 2019-11-20T23:07:39.70+09:00 is 14:07:39.7 UTC.
    const taken = read("2019:11:20 23:07:39", "70", "+09:00");
    expect(taken).toEqual({
      local: "2019-11-20T23:07:39.70",
      localMs: Date.parse("2019-11-20T23:07:39.700Z"),
      hasFraction: true,
      offsetMinutes: 540,
    });
    const utcMs = (taken?.localMs ?? 0) - (taken?.offsetMinutes ?? 0) * 60_000;
    expect(new Date(utcMs).toISOString()).toBe("2019-11-20T14:07:39.700Z");
  });

  test.each([
    ["7", 700],
    ["70", 700],
    ["07", 70],
    ["7 ", 700],
    ["070000", 70],
  ])("the digits %j are those of the fraction", (digits, ms) => {
    expect((read("2019:11:20 23:07:39", digits)?.localMs ?? 0) % 1000).toBe(ms);
  });

  test("without offset or fraction these are unknown", () => {
    for (const blank of [null, "", "   ", "   :  "]) {
      expect(read("2019:11:20 23:07:39", blank, blank)).toEqual({
        local: "2019-11-20T23:07:39",
        localMs: Date.UTC(2019, 10, 20, 23, 7, 39),
        hasFraction: false,
        offsetMinutes: null,
      });
    }
  });

  test.each([
    ["-05:30", -330],
    ["+00:00", 0],
    ["-00:00", 0],
    ["+14:00", 840],
    ["+15:00", null],
    ["+05:75", null],
    ["0900", null],
  ])("the offset %s is %s minutes", (offset, minutes) => {
    expect(read("2019:11:20 23:07:39", null, offset)?.offsetMinutes).toBe(minutes);
  });

  test.each([
    null,
    "",
    "    :  :     :  :  ",
    "0000:00:00 00:00:00",
    "2019:02:30 10:00:00",
    "2019:13:01 10:00:00",
    "2019:01:01 24:00:00",
    "2019:01:01 10:61:00",
    "yesterday",
    "2019:01:01",
  ])("%j is no time", (dateTime) => {
    expect(read(dateTime)).toBeNull();
  });

  test("times in the future and leap days are times", () => {
    expect(read("2199:12:31 23:59:59")?.local).toBe("2199-12-31T23:59:59");
    expect(read("2020:02:29 00:00:00")?.local).toBe("2020-02-29T00:00:00");
    expect(read("2019:02:29 00:00:00")).toBeNull();
  });
});
