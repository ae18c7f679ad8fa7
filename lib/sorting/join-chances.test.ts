import { describe, expect, test } from "vitest";
import { pretendShoot, toSortFrame } from "@/tests/support/accuracy/pretend-shoot";
import { joinChance } from "./join-chances";
import type { Join } from "./split-stacks";

const [first, second] = pretendShoot({
  rows: 1,
  columns: 1,
  framesPerTile: 2,
  order: { along: "rows", from: "top-left", turns: false },
}).map(toSortFrame);

function join(change: Partial<Join>): Join {
  if (!first || !second) throw new Error("a shoot of two frames has two");
  const measure = { xPx: 0, yPx: 0, ncc: 0.2, peakRatio: 1.1, contrast: 0.3, ssim: 0.9 };
  return {
    before: first,
    after: second,
    measure,
    pauseS: 1,
    verdict: "unknown",
    isSame: true,
    basis: "time",
    ...change,
  };
}

const LIMIT = { seconds: 4, errorShare: 0 };

describe("joinChance", () => {
  test("is certain by a person and nearly so where pictures and time agree", () => {
    expect(joinChance(join({ basis: "person" }), LIMIT)).toBe(1);
    expect(joinChance(join({ verdict: "same", basis: "pictures and time" }), LIMIT)).toBeGreaterThan(0.99);
  });

  test("falls where the pause is near the limit, and where the limit is a bad one", () => {
    const clear = joinChance(join({ pauseS: 1 }), LIMIT);
    expect(joinChance(join({ pauseS: 3.9 }), LIMIT)).toBeLessThan(clear);
    expect(joinChance(join({ pauseS: 1 }), { seconds: 4, errorShare: 0.2 })).toBeLessThan(clear);
    expect(joinChance(join({ pauseS: null }), LIMIT)).toBeLessThan(clear);
  });

  test("is lowest where nothing decides", () => {
    expect(joinChance(join({ basis: "nothing", pauseS: null }), null)).toBeLessThan(0.6);
  });
});
