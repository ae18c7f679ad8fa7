import type { SeededRandom } from "../seeded-random";
import { blend, type Colour, css, shade } from "./colour";
import type { Drawing } from "./drawing";

export interface WindowStyle {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly frame: Colour;
  readonly shutter: Colour | null;
  readonly bars: { readonly across: number; readonly down: number };
  readonly hasSill: boolean;
  readonly hasLintel: boolean;
  /** 0 near to 1 lost in haze. */
  readonly haze: number;
  readonly hazeColour: Colour;
}

const GLASS_DARK: Colour = [38, 44, 50];
const GLASS_SKY: Colour = [126, 148, 166];
const CURTAIN: Colour = [206, 200, 186];

/** One window with reveal, glass, bars, sill and shutters, its upper left corner at (x, y). */
export function drawWindow(drawing: Drawing, x: number, y: number, style: WindowStyle, random: SeededRandom): void {
  const { widthPx, heightPx, haze, hazeColour } = style;
  const tone = (colour: Colour) => css(blend(colour, hazeColour, haze));
  if (style.hasLintel)
    drawing.rect(x - 5, y - 9, widthPx + 10, 9, { fill: tone(shade(style.frame, 0.82)), material: "plaster" });
  drawing.rect(x - 2, y - 2, widthPx + 4, heightPx + 4, { fill: tone(shade(style.frame, 0.72)) });
  drawing.rect(x, y, widthPx, heightPx, { fill: tone(style.frame) });
  drawPanes(drawing, x, y, style, random);
  // The wall's thickness: the sun stands high on the left, so the upper and left reveal lie in shade.
  drawing.rect(x, y, widthPx, Math.max(2, heightPx * 0.06), { fill: "#14161c", opacity: 0.5 * (1 - haze) });
  drawing.rect(x, y, Math.max(1.5, widthPx * 0.06), heightPx, { fill: "#14161c", opacity: 0.4 * (1 - haze) });
  if (style.hasSill) {
    drawing.rect(x - 5, y + heightPx, widthPx + 10, 5, { fill: tone([214, 206, 190]), material: "plaster" });
    drawing.rect(x - 4, y + heightPx + 5, widthPx + 10, 5, { fill: "#20222c", opacity: 0.3 * (1 - haze) });
  }
  if (style.shutter) drawShutters(drawing, x, y, style, random);
}

function drawPanes(drawing: Drawing, x: number, y: number, style: WindowStyle, random: SeededRandom): void {
  const { widthPx, heightPx, bars } = style;
  const tone = (colour: Colour) => css(blend(colour, style.hazeColour, style.haze));
  const edge = Math.max(2, widthPx * 0.07);
  const bar = Math.max(1.4, widthPx * 0.035);
  const paneWidth = (widthPx - 2 * edge - bar * (bars.across - 1)) / bars.across;
  const paneHeight = (heightPx - 2 * edge - bar * (bars.down - 1)) / bars.down;
  const mirror = random.between(0.05, 0.75);
  const curtain = random.chance(0.45) ? random.between(0.15, 0.9) : 0;
  const isDrawn = random.chance(0.3);
  for (let row = 0; row < bars.down; row++) {
    for (let column = 0; column < bars.across; column++) {
      const left = x + edge + column * (paneWidth + bar);
      const top = y + edge + row * (paneHeight + bar);
      // Old panes are never quite plane: each mirrors another bit of sky.
      const sky = Math.max(0, Math.min(1, mirror + random.between(-0.16, 0.16) - 0.25 * (row / bars.down)));
      drawing.rect(left, top, paneWidth, paneHeight, { fill: tone(blend(GLASS_DARK, GLASS_SKY, sky)) });
      const isSide = column === 0 || column === bars.across - 1;
      if (curtain > 0 && (isDrawn || isSide)) {
        const part = isDrawn ? curtain : 1;
        const width = isDrawn ? paneWidth : paneWidth * 0.55;
        const at = column === 0 || isDrawn ? left : left + paneWidth - width;
        drawing.rect(at, top, width, paneHeight * part, { fill: tone(blend(CURTAIN, GLASS_DARK, 0.35)), opacity: 0.7 });
      }
    }
  }
}

function drawShutters(drawing: Drawing, x: number, y: number, style: WindowStyle, random: SeededRandom): void {
  if (!style.shutter) return;
  const width = style.widthPx * 0.5;
  const isHalfClosed = random.chance(0.08);
  for (const side of [-1, 1]) {
    const left = side < 0 ? x - width - 3 + (isHalfClosed ? width * 0.6 : 0) : x + style.widthPx + 3;
    const colour = blend(shade(style.shutter, random.between(0.92, 1.05)), style.hazeColour, style.haze);
    drawing.rect(left + 3, y + 4, width, style.heightPx, { fill: "#1c1e28", opacity: 0.35 * (1 - style.haze) });
    drawing.rect(left, y - 2, width, style.heightPx + 4, { fill: css(colour), material: "timber" });
    if (style.haze > 0.25) continue;
    for (let slat = y + 4; slat < y + style.heightPx - 4; slat += 5) {
      drawing.rect(left + 3, slat, width - 6, 1.6, { fill: css(shade(colour, 0.72)) });
    }
  }
}
