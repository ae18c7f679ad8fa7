import { expect, test } from "vitest";
import { writeCsv } from "./csv";

test("quotes and commas are quoted, rows end with CRLF", () => {
  // check-values.md E46 (RFC 4180).
  expect(writeCsv([["aaa", 'b"bb', "c,c"]])).toBe('aaa,"b""bb","c,c"\r\n');
});

test("line breaks are quoted, nothing is an empty cell, numbers stay numbers", () => {
  expect(writeCsv([["a\nb", null, -1.5, true]])).toBe('"a\nb",,-1.5,true\r\n');
});

test.each(["=1+1", "+1", "-1", "@x", "\tx", "\rx"])("text like %j cannot run as a formula", (text) => {
  expect(
    writeCsv([[text]])
      .replaceAll('"', "")
      .startsWith("'"),
  ).toBe(true);
});

test.each(["a;=1+1", "a;b;+1", ";-1"])(
  "text like %j cannot run as a formula where cells are parted by semicolons",
  (text) => {
    for (const cell of writeCsv([[text]])
      .split(";")
      .slice(1))
      expect(cell.startsWith("'")).toBe(cell !== "b");
    expect(writeCsv([["a;b; c"]])).toBe("a;b; c\r\n");
  },
);
