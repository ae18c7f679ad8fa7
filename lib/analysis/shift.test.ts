import { describe, expect, test } from "vitest";

import { measureShift, prepareRegistration } from "@/lib/analysis/shift";
import { toRegistrationImage } from "@/lib/analysis/registration-image";
import type { RegistrationImage } from "@/lib/analysis/types";
import { makeRandom } from "@/tests/support/random";

const SCENE_PX = 900;
/** A scene of overlapping random boxes: edges of every size, as real ones have. */
function makeScene(seed: number): Float32Array {
  const random = makeRandom(seed);
  const data = new Float32Array(SCENE_PX * SCENE_PX).fill(110);
  for (let box = 0; box < 900; box += 1) {
    const left = Math.floor(random() * SCENE_PX);
    const top = Math.floor(random() * SCENE_PX);
    const widthPx = 6 + Math.floor(random() * 80);
    const heightPx = 6 + Math.floor(random() * 80);
    const level = 30 + random() * 190;
    for (let y = top; y < Math.min(SCENE_PX, top + heightPx); y += 1) {
      data.fill(level, y * SCENE_PX + left, y * SCENE_PX + Math.min(SCENE_PX, left + widthPx));
    }
  }
  return data;
}

const scene = makeScene(7);

function cut(left: number, top: number, widthPx = 300, heightPx = 200): RegistrationImage {
  const data = new Float32Array(widthPx * heightPx);
  for (let y = 0; y < heightPx; y += 1) {
    const from = (top + y) * SCENE_PX + left;
    data.set(scene.subarray(from, from + widthPx), y * widthPx);
  }
  return toRegistrationImage({ data, widthPx, heightPx }, 255);
}

const prepared = (left: number, top: number) => prepareRegistration(cut(left, top));
/** Registration pixels to pixels of the 300 px cut. */
const SCALE = 300 / 256;

describe("measureShift", () => {
  test("a picture against itself lies at 0 with a correlation of 1", () => {
    const shift = measureShift(prepared(100, 100), prepared(100, 100));
    expect(shift.x).toBeCloseTo(0, 6);
    expect(shift.y).toBeCloseTo(0, 6);
    expect(shift.ncc).toBeCloseTo(1, 5);
  });

  test.each([
    // check-values.md E33: frames of 300 x 200 px that overlap by a third.
    ["the right neighbour", 200, 0],
    ["the neighbour below", 0, 133],
    ["the left neighbour", -200, 0],
    ["a frame of the same stack", 2, -1],
    ["a diagonal neighbour", 190, 120],
  ])("%s lies where it was cut, to 1 px", (_name, x, y) => {
    const shift = measureShift(prepared(300, 300), prepared(300 + x, 300 + y));
    expect(Math.abs(shift.x * SCALE - x)).toBeLessThan(1);
    expect(Math.abs(shift.y * SCALE - y)).toBeLessThan(1);
    expect(shift.ncc).toBeGreaterThan(0.8);
    expect(shift.peakRatio).toBeGreaterThan(1.3);
  });

  test("swapping the two turns the sign", () => {
    const there = measureShift(prepared(300, 300), prepared(437, 351));
    const back = measureShift(prepared(437, 351), prepared(300, 300));
    expect(there.x).toBeCloseTo(-back.x, 3);
    expect(there.y).toBeCloseTo(-back.y, 3);
  });

  test("frames without any common part correlate weakly", () => {
    expect(measureShift(prepared(0, 0), prepared(600, 600)).ncc).toBeLessThan(0.35);
  });

  test("a portrait frame is measured like a landscape one", () => {
    const a = prepareRegistration(cut(300, 300, 200, 300));
    const b = prepareRegistration(cut(320, 450, 200, 300));
    const shift = measureShift(a, b);
    expect(Math.abs(shift.x * SCALE - 20)).toBeLessThan(1);
    expect(Math.abs(shift.y * SCALE - 150)).toBeLessThan(1);
  });

  test("a constant picture matches nothing and breaks nothing", () => {
    const plain = prepareRegistration({ data: new Uint16Array(256 * 170).fill(40000), widthPx: 256, heightPx: 170 });
    expect(measureShift(plain, plain)).toEqual({ x: 0, y: 0, ncc: 0, peakRatio: 1, contrast: 0, rivals: [] });
    expect(measureShift(plain, prepared(0, 0)).ncc).toBe(0);
  });

  test("a picture of one pixel breaks nothing", () => {
    const dot = prepareRegistration({ data: Uint16Array.of(500), widthPx: 1, heightPx: 1 });
    expect(measureShift(dot, prepared(0, 0)).ncc).toBe(0);
  });

  test("does not change its input", () => {
    const image = cut(10, 10);
    const before = Uint16Array.from(image.data);
    prepareRegistration(image);
    expect(image.data).toEqual(before);
  });
});
