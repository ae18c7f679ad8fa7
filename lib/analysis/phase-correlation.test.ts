import { describe, expect, test } from "vitest";

import { areaAverage } from "@/lib/analysis/area-average";
import { highPass } from "@/lib/analysis/high-pass";
import { correlateOverlap, overlapAt } from "@/lib/analysis/overlap-correlation";
import { phaseCorrelation, spectrumOf } from "@/lib/analysis/phase-correlation";
import { parabolaOffset } from "@/lib/analysis/sub-pixel";
import { makeRandom } from "@/tests/support/random";

describe("phaseCorrelation", () => {
  const random = makeRandom(5);
  const side = 16;
  const a = Float32Array.from({ length: side * side }, () => random());
  // Content moved right by 3 and up by 2, cyclically.
  const b = a.map((_, i) => a[((Math.floor(i / side) + 2) % side) * side + ((i + side - 3) % side)] ?? 0);
  const spectrum = (data: Float32Array) => spectrumOf({ data, widthPx: side, heightPx: side }, side);

  test("a rolled picture has one peak of height 1 where its corner lies", () => {
    // check-values.md E31 (Kuglin and Hines): content moved by (3, -2), so the corner lies at (-3, 2), which is (13, 2).
    const surface = phaseCorrelation(spectrum(a), spectrum(b), 1);
    const peak = surface.indexOf(Math.max(...surface));
    expect([peak % side, Math.floor(peak / side)]).toEqual([13, 2]);
    // float32 spectra: five decimals.
    expect(surface[peak]).toBeCloseTo(1, 5);
    expect(Math.max(...surface.filter((_, i) => i !== peak))).toBeLessThan(1e-5);
  });

  test("without whitening it is the plain cyclic cross-correlation", () => {
    const surface = phaseCorrelation(spectrum(a), spectrum(b), 0);
    let expected = 0;
    for (let y = 0; y < side; y += 1) {
      for (let x = 0; x < side; x += 1) {
        expected += (b[y * side + x] ?? 0) * (a[((y + 1) % side) * side + ((x + 4) % side)] ?? 0);
      }
    }
    expect(surface[1 * side + 4]).toBeCloseTo(expected, 3);
  });

  test("the exponent in use gives what the power function gives", () => {
    const quick = phaseCorrelation(spectrum(a), spectrum(b), 0.75);
    const plain = phaseCorrelation(spectrum(a), spectrum(b), 0.75 + 1e-12);
    quick.forEach((value, i) => expect(value).toBeCloseTo(plain[i] ?? 0, 5));
  });

  test("refuses a picture that does not fit, and spectra of two sizes", () => {
    expect(() => spectrumOf({ data: new Float32Array(9), widthPx: 9, heightPx: 1 }, 8)).toThrow("fit into 8 px");
    const small = spectrumOf({ data: new Float32Array(4), widthPx: 2, heightPx: 2 }, 8);
    expect(() => phaseCorrelation(small, spectrum(a), 1)).toThrow("one size");
  });
});

describe("correlateOverlap", () => {
  const a = { data: Float32Array.of(1, 2, 3, 4, 5, 6, 9, 8, 7), widthPx: 3, heightPx: 3 };

  test("knows which parts lie on each other", () => {
    expect(overlapAt(a, a, 1, -2)).toEqual({ leftPx: 1, topPx: 0, widthPx: 2, heightPx: 1 });
    expect(overlapAt(a, a, 3, 0)).toMatchObject({ widthPx: 0 });
  });

  test("is the correlation of the overlapping values", () => {
    // Worked by hand: at (1, 0) the pairs are (2,1) (3,2) (5,4) (6,5) (8,9) (7,8): covariance 68/12, variances 77/18 and
    // 329/36, so r = 5.6667 / sqrt(4.4722 x 8.4722) with means 31/6 and 29/6.
    const pairs = [
      [2, 1],
      [3, 2],
      [5, 4],
      [6, 5],
      [8, 9],
      [7, 8],
    ] as const;
    const mean = (at: 0 | 1) => pairs.reduce((sum, pair) => sum + pair[at], 0) / 6;
    const product = (s: 0 | 1, t: 0 | 1) =>
      pairs.reduce((sum, pair) => sum + (pair[s] - mean(s)) * (pair[t] - mean(t)), 0);
    const { ncc, samples } = correlateOverlap(a, a, 1, 0);
    expect(samples).toBe(6);
    expect(ncc).toBeCloseTo(product(0, 1) / Math.sqrt(product(0, 0) * product(1, 1)), 6);
  });

  test("a constant part or none correlates with nothing", () => {
    const flat = { data: new Float32Array(9).fill(4), widthPx: 3, heightPx: 3 };
    expect(correlateOverlap(a, flat, 0, 0).ncc).toBe(0);
    expect(correlateOverlap(a, a, 5, 0)).toMatchObject({ ncc: 0, samples: 0 });
  });
});

describe("parabolaOffset", () => {
  test("finds the top of a parabola exactly", () => {
    const top = (x: number) => 5 - 2 * (x - 0.3) ** 2;
    expect(parabolaOffset(top(-1), top(0), top(1))).toBeCloseTo(0.3, 12);
  });

  test("stays within half a step where the middle is not the highest, and at 0 on a line", () => {
    expect(parabolaOffset(0, 1, 5)).toBe(0);
    expect(parabolaOffset(0, 4.9, 5)).toBe(0.5);
    expect(parabolaOffset(2, 2, 2)).toBe(0);
  });
});

describe("highPass", () => {
  test("leaves nothing of a ramp, up to the border", () => {
    const data = Float32Array.from({ length: 20 * 12 }, (_, i) => 2 * (i % 20) + 3 * Math.floor(i / 20));
    const detail = highPass({ data, widthPx: 20, heightPx: 12 }, 4);
    for (const value of detail.data) expect(value).toBeCloseTo(0, 4);
  });

  test("keeps a point and takes its share from the box around it", () => {
    const data = new Float32Array(81);
    data[40] = 9;
    const detail = highPass({ data, widthPx: 9, heightPx: 9 }, 1);
    expect(detail.data[40]).toBeCloseTo(8, 6);
    expect(detail.data[30]).toBeCloseTo(-1, 6);
    expect(detail.data[38]).toBeCloseTo(0, 6);
  });
});

describe("areaAverage", () => {
  test("shares border pixels by area", () => {
    // 3 px onto 2: (1 x 6 + 0.5 x 12) / 1.5 and (0.5 x 12 + 1 x 30) / 1.5.
    const small = areaAverage({ data: Uint8Array.of(6, 12, 30), widthPx: 3, heightPx: 1 }, 2, 1);
    expect([...small.data]).toEqual([8, 24]);
  });

  test("keeps the mean whatever the size", () => {
    const random = makeRandom(6);
    const data = Float32Array.from({ length: 97 * 61 }, () => random() * 255);
    const mean = (values: Float32Array) => values.reduce((sum, value) => sum + value, 0) / values.length;
    for (const [w, h] of [
      [97, 61],
      [50, 61],
      [13, 7],
      [1, 1],
    ] as const) {
      expect(mean(areaAverage({ data, widthPx: 97, heightPx: 61 }, w, h).data)).toBeCloseTo(mean(data), 3);
    }
  });

  test("never enlarges", () => {
    expect(() => areaAverage({ data: new Uint8Array(4), widthPx: 2, heightPx: 2 }, 3, 2)).toThrow("within 2 x 2");
  });
});
