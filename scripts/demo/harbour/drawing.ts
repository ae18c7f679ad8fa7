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

/** Collects shapes twice: in colour, and as a map of materials. Shapes that are half transparent keep what lies below. */
export class Drawing {
  private readonly colours: string[] = [];
  private readonly materials: string[] = [];
  private readonly gradients: string[] = [];
  private readonly gradientIds = new Set<string>();

  constructor(readonly size: FrameSize) {}

  private add(geometry: string, look: Look): void {
    const opacity = look.opacity ?? 1;
    this.colours.push(
      `<${geometry} fill="${look.fill}"${opacity < 1 ? ` fill-opacity="${round(opacity * 10) / 10}"` : ""}/>`,
    );
    if (opacity < 1) return;
    const id = MATERIALS[look.material ?? "smooth"];
    this.materials.push(`<${geometry} fill="rgb(${id},${Math.round(look.variant ?? 0)},0)"/>`);
  }

  rect(x: number, y: number, width: number, height: number, look: Look): void {
    this.add(`rect x="${round(x)}" y="${round(y)}" width="${round(width)}" height="${round(height)}"`, look);
  }

  ellipse(x: number, y: number, radiusX: number, radiusY: number, look: Look): void {
    this.add(`ellipse cx="${round(x)}" cy="${round(y)}" rx="${round(radiusX)}" ry="${round(radiusY)}"`, look);
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
    this.colours.push(
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
    this.colours.push(open);
    this.materials.push(open);
    content();
    this.colours.push("</g>");
    this.materials.push("</g>");
  }

  private render(shapes: readonly string[], attributes: string): Promise<Buffer> {
    const { widthPx, heightPx } = this.size;
    const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${widthPx}" height="${heightPx}" ${attributes}><defs>${this.gradients.join("")}</defs>${shapes.join("\n")}</svg>`;
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
