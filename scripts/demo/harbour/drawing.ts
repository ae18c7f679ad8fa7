import sharp from "sharp";
import type { FrameSize } from "../pose";

/** What a surface is made of; its fine structure is added pixel by pixel afterwards. 0: none. */
export const MATERIALS = {
  smooth: 0,
  plaster: 1,
  roofTile: 2,
  rubble: 3,
  quayStone: 4,
  timber: 5,
  foliage: 6,
  mud: 7,
  hull: 8,
  brick: 9,
  paving: 10,
  grass: 11,
  slate: 12,
  roofTileFar: 13,
  rubbleFar: 14,
} as const;
export type Material = keyof typeof MATERIALS;

interface Look {
  /** A colour, or `url(#id)` of a gradient. */
  readonly fill: string;
  readonly material?: Material;
  /** 0 to 1. */
  readonly opacity?: number;
  /** 0 to 255: makes one roof or wall differ from the next of the same material. */
  readonly variant?: number;
}

const round = (value: number) => Math.round(value * 10) / 10;

/** More sub-paths in one shape would slow its filling down more than another shape costs. */
const MOST_JOINED = 48;

/** Shapes in the order drawn. Turning clockwise, like ones that follow each other become one: a shape is what costs. */
class ShapeList {
  private readonly shapes: string[] = [];
  private open: { readonly look: string; outlines: string[] } | null = null;

  /** @param outline - path data of a rectangle or ellipse, clockwise, so that joined ones never cancel each other */
  addClockwise(outline: string, look: string): void {
    if (this.open?.look !== look || this.open.outlines.length >= MOST_JOINED) {
      this.close();
      this.open = { look, outlines: [] };
    }
    this.open?.outlines.push(outline);
  }

  add(shape: string): void {
    this.close();
    this.shapes.push(shape);
  }

  private close(): void {
    if (this.open) this.shapes.push(`<path d="${this.open.outlines.join("")}"${this.open.look}/>`);
    this.open = null;
  }

  text(): string {
    this.close();
    return this.shapes.join("\n");
  }
}

/** Collects shapes twice: in colour, and as a map of materials. Shapes that are half transparent keep what lies below. */
export class Drawing {
  private readonly colours = new ShapeList();
  private readonly materials = new ShapeList();
  private readonly gradients: string[] = [];
  private readonly gradientIds = new Set<string>();

  constructor(readonly size: FrameSize) {}

  private add(geometry: string, look: Look): void {
    this.colours.add(`<${geometry}${colourOf(look)}/>`);
    if (isOpaque(look)) this.materials.add(`<${geometry}${materialOf(look)}/>`);
  }

  private addClockwise(outline: string, look: Look): void {
    if (isOpaque(look)) {
      this.colours.addClockwise(outline, colourOf(look));
      this.materials.addClockwise(outline, materialOf(look));
    } else this.colours.add(`<path d="${outline}"${colourOf(look)}/>`);
  }

  rect(x: number, y: number, width: number, height: number, look: Look): void {
    if (look.fill.startsWith("url(")) {
      // A gradient runs over the whole shape: joined with another it would run over both.
      this.add(`rect x="${round(x)}" y="${round(y)}" width="${round(width)}" height="${round(height)}"`, look);
    } else {
      const [across, down] = [round(width), round(height)];
      if (across > 0 && down > 0) this.addClockwise(`M${round(x)} ${round(y)}h${across}v${down}h${-across}z`, look);
    }
  }

  ellipse(x: number, y: number, radiusX: number, radiusY: number, look: Look): void {
    if (look.fill.startsWith("url(")) {
      this.add(`ellipse cx="${round(x)}" cy="${round(y)}" rx="${round(radiusX)}" ry="${round(radiusY)}"`, look);
    } else {
      const [rx, ry] = [round(radiusX), round(radiusY)];
      const half = (toX: number) => `a${rx} ${ry} 0 0 1 ${toX} 0`;
      if (rx > 0 && ry > 0) {
        this.addClockwise(`M${round(x - rx)} ${round(y)}${half(round(2 * rx))}${half(round(-2 * rx))}z`, look);
      }
    }
  }

  polygon(points: readonly (readonly [number, number])[], look: Look): void {
    this.add(`polygon points="${points.map(([x, y]) => `${round(x)},${round(y)}`).join(" ")}"`, look);
  }

  /** `d` as in an SVG path. */
  path(d: string, look: Look): void {
    this.add(`path d="${d}"`, look);
  }

  line(from: readonly [number, number], to: readonly [number, number], stroke: string, width: number): void {
    this.curve(`M${round(from[0])} ${round(from[1])}L${round(to[0])} ${round(to[1])}`, stroke, width);
  }

  curve(d: string, stroke: string, width: number): void {
    this.colours.add(
      `<path d="${d}" fill="none" stroke="${stroke}" stroke-width="${round(width)}" stroke-linecap="round"/>`,
    );
  }

  verticalGradient(id: string, stops: readonly (readonly [at: number, colour: string, opacity?: number])[]): string {
    const inner = stops
      .map(([at, colour, opacity = 1]) => `<stop offset="${at}" stop-color="${colour}" stop-opacity="${opacity}"/>`)
      .join("");
    if (!this.gradientIds.has(id))
      this.gradients.push(`<linearGradient id="${id}" x1="0" y1="0" x2="0" y2="1">${inner}</linearGradient>`);
    this.gradientIds.add(id);
    return `url(#${id})`;
  }

  /** Draws `content` moved, turned clockwise in degrees and scaled about (x, y). */
  placed(
    at: { x: number; y: number; turnDeg?: number; scale?: number; isMirrored?: boolean; isUpsideDown?: boolean },
    content: () => void,
  ): void {
    const { x, y, turnDeg = 0, scale = 1, isMirrored = false, isUpsideDown = false } = at;
    const open = `<g transform="translate(${round(x)} ${round(y)}) rotate(${turnDeg}) scale(${isMirrored ? -scale : scale} ${isUpsideDown ? -scale : scale})">`;
    this.colours.add(open);
    this.materials.add(open);
    content();
    this.colours.add("</g>");
    this.materials.add("</g>");
  }

  private render(shapes: ShapeList, attributes: string): Promise<Buffer> {
    const { widthPx, heightPx } = this.size;
    const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${widthPx}" height="${heightPx}" ${attributes}><defs>${this.gradients.join("")}</defs>${shapes.text()}</svg>`;
    return sharp(Buffer.from(svg), { unlimited: true, limitInputPixels: false }).ensureAlpha().raw().toBuffer();
  }

  /** @returns red, green, blue, alpha interleaved, 0 to 255 */
  renderColours(): Promise<Buffer> {
    return this.render(this.colours, "");
  }

  /** @returns material, variant, 0, alpha interleaved */
  renderMaterials(): Promise<Buffer> {
    return this.render(this.materials, 'shape-rendering="crispEdges"');
  }
}

const opacityOf = ({ opacity = 1 }: Look) => opacity;
const isOpaque = (look: Look) => opacityOf(look) === 1;

function colourOf(look: Look): string {
  return ` fill="${look.fill}"${isOpaque(look) ? "" : ` fill-opacity="${round(opacityOf(look) * 10) / 10}"`}`;
}

function materialOf({ material = "smooth", variant = 0 }: Look): string {
  return ` fill="rgb(${MATERIALS[material]},${Math.round(variant)},0)"`;
}
