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
