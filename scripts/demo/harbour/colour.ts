export type Colour = readonly [red: number, green: number, blue: number];

export function css(colour: Colour): string {
  return `rgb(${colour.map((level) => Math.round(Math.max(0, Math.min(255, level)))).join(",")})`;
}

/** @param amount - 0 gives the first, 1 the second */
export function blend(first: Colour, second: Colour, amount: number): Colour {
  return [
    first[0] + amount * (second[0] - first[0]),
    first[1] + amount * (second[1] - first[1]),
    first[2] + amount * (second[2] - first[2]),
  ];
}

export function shade(colour: Colour, factor: number): Colour {
  return [colour[0] * factor, colour[1] * factor, colour[2] * factor];
}

/** What distance does to colour on a hazy morning. */
export const HAZE: Colour = [196, 206, 214];
