import { expect, test } from "vitest";

import { pairFiles } from "@/lib/frames/pairing";

const file = (name: string, folder: string | null = null) => ({ name, folder });
const names = (files: Parameters<typeof pairFiles>[0]) =>
  pairFiles(files).map((frame) => frame.files.map((f) => f.name));

test("a raw file and the JPEG of its stem are one frame, the JPEG first", () => {
  // check-values.md E38 (DCF): ABCD0001.RAW and ABCD0001.JPG are one frame in two files.
  expect(names([file("ABCD0001.RAW"), file("ABCD0001.JPG")])).toEqual([["ABCD0001.JPG", "ABCD0001.RAW"]]);
});

test("upper and lower case are one name", () => {
  expect(names([file("abcd0001.jpg"), file("ABCD0001.NEF")])).toEqual([["abcd0001.jpg", "ABCD0001.NEF"]]);
});

test("the same stem in another folder is another frame", () => {
  expect(names([file("A0001.JPG", "100"), file("A0001.DNG", "101")])).toEqual([["A0001.JPG"], ["A0001.DNG"]]);
});

test("two pictures of one stem that can be decoded are two frames; the raw file goes to the first", () => {
  const files = [file("A0001.DNG"), file("A0001.JPG"), file("A0001.TIF")];
  expect(names(files)).toEqual([["A0001.JPG", "A0001.DNG"], ["A0001.TIF"]]);
});

test("raw files alone are frames, and two of one stem are one", () => {
  expect(names([file("A0001.DNG"), file("A0002.NEF"), file("A0001.RAF")])).toEqual([
    ["A0001.DNG", "A0001.RAF"],
    ["A0002.NEF"],
  ]);
});

test("the same name twice is two frames, and input stays as it was", () => {
  const files = Object.freeze([file("A.JPG"), file("A.JPG")]);
  expect(names(files)).toEqual([["A.JPG"], ["A.JPG"]]);
});
