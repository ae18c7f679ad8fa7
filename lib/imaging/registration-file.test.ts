import { expect, test } from "vitest";

import { decodeRegistration, encodeRegistration } from "@/lib/imaging/registration-file";

const image = { data: Uint16Array.of(0, 1, 65535, 256, 40000, 7), widthPx: 3, heightPx: 2 };

test("a registration image comes back as it was", () => {
  expect(decodeRegistration(encodeRegistration(image))).toEqual(image);
});

test("a cut, foreign or empty file is refused", () => {
  const file = encodeRegistration(image);
  expect(() => decodeRegistration(file.subarray(0, file.length - 1))).toThrow("not a registration image");
  expect(() => decodeRegistration(Buffer.from("JPEGJPEGJPEG"))).toThrow("not a registration image");
  expect(() => decodeRegistration(Buffer.alloc(0))).toThrow("not a registration image");
});
