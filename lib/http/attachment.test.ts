import { expect, test } from "vitest";
import { attachment } from "@/lib/http/attachment";

test("a name in another script is sent encoded, with a plain one beside it", () => {
  // RFC 8187, 3.2.3: "£ and € rates" is UTF-8''%c2%a3%20and%20%e2%82%ac%20rates (case of hex digits is free).
  expect(attachment("£ and € rates", ".csv")).toBe(
    `attachment; filename="_ and _ rates.csv"; filename*=UTF-8''%C2%A3%20and%20%E2%82%AC%20rates.csv`,
  );
});

test("what file systems or the header would trip over is replaced, and no name is empty", () => {
  expect(attachment('a/b\\c:"d"\r\n', ".json")).toContain('filename="a_b_c_d_.json"');
  expect(attachment("it's (1)*", ".csv")).toContain("filename*=UTF-8''it%27s%20%281%29_.csv");
  expect(attachment(" ", ".csv")).toContain('filename="project.csv"');
});

test("percent signs are only in the encoded name, and half a character is replaced", () => {
  // RFC 6266, appendix D: avoid "%" followed by two hex digits in the plain parameter, browsers decode it.
  expect(attachment("50%25.jpg", "")).toBe(`attachment; filename="50_25.jpg"; filename*=UTF-8''50%2525.jpg`);
  expect(attachment("a\ud800.jpg", "")).toContain("filename*=UTF-8''a_.jpg");
});
