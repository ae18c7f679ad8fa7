import { expect, test } from "vitest";
import { cropUrl } from "@/lib/frames/picture-urls";

const FRAME = { widthPx: 6000, heightPx: 4000 };

test("a crop is asked for around its middle, pushed inside the frame, and cut down to what one may have", () => {
  const of = (centreXPx: number, centreYPx: number, side: number) =>
    cropUrl("p", "f", { ...FRAME, centreXPx, centreYPx, cropWidthPx: side, cropHeightPx: side });
  expect(of(3000, 2000, 512)).toBe("/api/projects/p/frames/f/crop?x=2744&y=1744&w=512&h=512");
  expect(of(0, 0, 512)).toBe("/api/projects/p/frames/f/crop?x=0&y=0&w=512&h=512");
  expect(of(6000, 4000, 512)).toBe("/api/projects/p/frames/f/crop?x=5488&y=3488&w=512&h=512");
  expect(of(3000, 2000, 5000)).toBe("/api/projects/p/frames/f/crop?x=1976&y=976&w=2048&h=2048");
});

test("a frame smaller than the crop is shown whole", () => {
  const small = { widthPx: 300, heightPx: 200, centreXPx: 10, centreYPx: 10, cropWidthPx: 512, cropHeightPx: 512 };
  expect(cropUrl("p", "f", small)).toBe("/api/projects/p/frames/f/crop?x=0&y=0&w=300&h=200");
});
