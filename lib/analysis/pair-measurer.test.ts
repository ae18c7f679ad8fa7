import { describe, expect, test } from "vitest";

import { createPairMeasurer } from "@/lib/analysis/pair-measurer";
import { turnImage } from "@/lib/analysis/turn-image";
import type { RegistrationImage } from "@/lib/analysis/types";
import { makeRandom } from "@/tests/support/random";

/** A scene of blocks, cut at a place that the id names. */
function imageAt(id: string): RegistrationImage {
  const [left = 0, top = 0] = id.split(",").map(Number);
  const random = makeRandom(11);
  const levels = Array.from({ length: 100 * 100 }, () => random() * 60000);
  const data = new Uint16Array(240 * 160);
  for (let y = 0; y < 160; y += 1) {
    for (let x = 0; x < 240; x += 1) data[y * 240 + x] = levels[((y + top) >> 3) * 100 + ((x + left) >> 3)] ?? 0;
  }
  return { data, widthPx: 240, heightPx: 160 };
}

describe("createPairMeasurer", () => {
  test("shifts are in full-size pixels of the first frame, and swapping turns them exactly", async () => {
    const measure = createPairMeasurer({
      load: (id) => Promise.resolve({ image: imageAt(id), widthPx: 6000, heightPx: 4000 }),
      measureSsim: () => 0.5,
    });
    const there = await measure("100,100", "260,120");
    const back = await measure("260,120", "100,100");
    // 160 and 20 registration pixels, 25 full-size pixels each; half a registration pixel of tolerance.
    expect(Math.abs(there.xPx - 4000)).toBeLessThan(12.5);
    expect(Math.abs(there.yPx - 500)).toBeLessThan(12.5);
    expect(back).toEqual({ ...there, xPx: -there.xPx, yPx: -there.yPx });
    expect(there.ssim).toBe(0.5);
  });

  test("keeps the last used frames and loads the others again", async () => {
    const loaded: string[] = [];
    const measure = createPairMeasurer({
      load: (id) => {
        loaded.push(id);
        return Promise.resolve({ image: imageAt(id), widthPx: 240, heightPx: 160 });
      },
      measureSsim: () => 0,
      preparedKept: 2,
    });
    await measure("0,0", "8,0");
    await measure("8,0", "0,0");
    expect(loaded).toEqual(["0,0", "8,0"]);
    await measure("8,0", "16,0");
    await measure("0,0", "16,0");
    expect(loaded).toEqual(["0,0", "8,0", "16,0", "0,0"]);
  });

  test("a frame that could not be loaded is tried again", async () => {
    let tries = 0;
    const measure = createPairMeasurer({
      load: (id) => {
        tries += 1;
        if (tries === 1) return Promise.reject(new Error("gone"));
        return Promise.resolve({ image: imageAt(id), widthPx: 240, heightPx: 160 });
      },
      measureSsim: () => 0,
    });
    await expect(measure("0,0", "0,0")).rejects.toThrow("gone");
    await expect(measure("0,0", "0,0")).resolves.toMatchObject({ xPx: 0, yPx: 0 });
  });

  test("frames turned by 3 degrees match when turning is tried, at the same shift", async () => {
    const turned = turnImage(imageAt("108,104"), (3 * Math.PI) / 180);
    const measure = createPairMeasurer({
      load: (id) => Promise.resolve({ image: id === "turned" ? turned : imageAt(id), widthPx: 240, heightPx: 160 }),
      measureSsim: () => 0,
    });
    const plain = await measure("100,100", "turned");
    const found = await measure("100,100", "turned", "turned");
    expect(found.ncc).toBeGreaterThan(plain.ncc + 0.2);
    expect(Math.hypot(found.xPx - 8, found.yPx - 4)).toBeLessThan(1);
  });
});
