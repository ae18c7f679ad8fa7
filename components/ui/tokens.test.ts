import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";

/** Both values of each `light-dark()` token of app/globals.css; one value counts for both themes. */
function readTokens(): Map<string, readonly [string, string]> {
  const css = readFileSync(new URL("../../app/globals.css", import.meta.url), "utf8");
  const pairs = css.matchAll(/--([a-z-]+):\s*(?:light-dark\((#[0-9a-f]{6}),\s*(#[0-9a-f]{6})\)|(#[0-9a-f]{6}));/g);
  return new Map(
    [...pairs].map(([, name, light, dark, both]) => [name ?? "", [light ?? both ?? "", dark ?? both ?? ""]]),
  );
}

/** Relative luminance of an sRGB colour. Source: WCAG 2.2, "relative luminance", w3.org/TR/WCAG22. */
function luminance(hex: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((start) => {
    const value = Number.parseInt(hex.slice(start, start + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

/** Source: WCAG 2.2, "contrast ratio". */
function contrast(one: string, other: string): number {
  const [light = 0, dark = 0] = [luminance(one), luminance(other)].sort((a, b) => b - a);
  return (light + 0.05) / (dark + 0.05);
}

test("the contrast formula gives the known ratios", () => {
  // Black on white is 21:1 by definition; #767676 is the well-known lightest grey with 4.5:1 on white (WebAIM, from memory).
  expect(contrast("#000000", "#ffffff")).toBeCloseTo(21, 10);
  expect(contrast("#767676", "#ffffff")).toBeGreaterThanOrEqual(4.5);
  expect(contrast("#777777", "#ffffff")).toBeLessThan(4.5);
});

// WCAG 2.2, 1.4.3: text 4.5:1.
const TEXT: readonly (readonly [string, string])[] = [
  ["ink", "paper"],
  ["ink", "tray"],
  ["quiet", "paper"],
  ["quiet", "tray"],
  ["paper", "ink"],
  ["petrol", "paper"],
  ["petrol-on", "petrol"],
  ["ochre", "paper"],
  ["ochre-on", "ochre-wash"],
  ["madder", "paper"],
  ["madder-on", "madder-wash"],
  ["paper", "madder"],
];

// WCAG 2.2, 1.4.11: edges of controls and states 3:1; 2.4.13 for the focus outline, also on the well.
const EDGES: readonly (readonly [string, string])[] = [
  ["line", "paper"],
  ["line", "tray"],
  ["petrol", "paper"],
  ["ochre", "ochre-wash"],
  ["madder", "madder-wash"],
  ["ink", "well"],
  ["paper", "well"],
];

describe.each([
  ["light", 0],
  ["dark", 1],
] as const)("in the %s theme", (_theme, index) => {
  const tokens = readTokens();
  const colour = (name: string): string => {
    const value = tokens.get(name)?.[index];
    if (!value) throw new Error(`no token --${name}`);
    return value;
  };

  test.each(TEXT)("%s is legible on %s", (front, back) => {
    expect(contrast(colour(front), colour(back))).toBeGreaterThanOrEqual(4.5);
  });

  test.each(EDGES)("an edge in %s is seen on %s", (front, back) => {
    expect(contrast(colour(front), colour(back))).toBeGreaterThanOrEqual(3);
  });

  test("the well is the neutral mid grey", () => {
    expect(colour("well")).toBe("#777777");
  });
});
