import { type FrameSize, type Pose, sceneToFrame } from "@/scripts/demo/pose";
import { makeRandom, mixSeeds } from "@/scripts/demo/seeded-random";
import type { Scene } from "./scene";

interface Mover {
  readonly kind: "person" | "cloud";
  readonly xPx: number;
  readonly yPx: number;
  readonly pxPerSecond: number;
  readonly radiusPx: number;
  readonly tone: number;
}

/** People who walk along the lower part of the scene and clouds that drift over its sky. */
export function makeMovers(scene: Scene, size: FrameSize, seed: number): Mover[] {
  const random = makeRandom(mixSeeds(seed, 41));
  const { widthPx, heightPx } = scene.raster;
  const people = Array.from({ length: Math.round(widthPx / size.widthPx) * 4 }, (): Mover => ({
    kind: "person",
    xPx: random.between(0, widthPx),
    yPx: heightPx * random.between(0.6, 0.95),
    pxPerSecond: size.widthPx * random.between(0.01, 0.04) * (random.chance(0.5) ? 1 : -1),
    radiusPx: size.heightPx * random.between(0.02, 0.035),
    tone: random.between(20, 220),
  }));
  const clouds = Array.from({ length: Math.round(widthPx / size.widthPx) * 6 }, (): Mover => ({
    kind: "cloud",
    xPx: random.between(0, widthPx),
    yPx: random.between(0, Math.max(...scene.skylinePx)),
    pxPerSecond: size.widthPx * 0.004,
    radiusPx: size.heightPx * random.between(0.08, 0.25),
    tone: random.between(12, 34),
  }));
  return [...clouds, ...people];
}

/** Draws the movers where they are `seconds` after the start. */
export function paintMovers(
  pixels: Float32Array,
  movers: readonly Mover[],
  frame: { pose: Pose; size: FrameSize; scene: Scene; seconds: number },
): void {
  const { pose, size, scene, seconds } = frame;
  const { widthPx } = scene.raster;
  for (const mover of movers) {
    const travelled = mover.xPx + mover.pxPerSecond * seconds;
    const xPx = ((travelled % widthPx) + widthPx) % widthPx;
    const centre = sceneToFrame(pose, size, { xPx, yPx: mover.yPx });
    const reachY = mover.kind === "person" ? mover.radiusPx * 2.2 : mover.radiusPx * 0.6;
    const left = Math.max(0, Math.floor(centre.xPx - mover.radiusPx * 2));
    const right = Math.min(size.widthPx - 1, Math.ceil(centre.xPx + mover.radiusPx * 2));
    const top = Math.max(0, Math.floor(centre.yPx - reachY * 2));
    const bottom = Math.min(size.heightPx - 1, Math.ceil(centre.yPx + reachY * 2));
    for (let y = top; y <= bottom; y++) {
      for (let x = left; x <= right; x++) {
        const across = (x - centre.xPx) / mover.radiusPx;
        const down = (y - centre.yPx) / reachY;
        const at = (y * size.widthPx + x) * 3;
        if (mover.kind === "person") paintPerson(pixels, at, across, down, mover.tone);
        else if (isSky(scene, xPx + x - centre.xPx, mover.yPx + y - centre.yPx))
          paintCloud(pixels, at, across, down, mover.tone);
      }
    }
  }
}

function isSky(scene: Scene, xPx: number, yPx: number): boolean {
  const skyline = scene.skylinePx[Math.round(xPx)];
  return skyline !== undefined && yPx < skyline - 2;
}

function paintPerson(pixels: Float32Array, at: number, across: number, down: number, tone: number): void {
  const isBody = across * across * 2 + down * down < 1;
  const isHead = across * across * 7 + (down + 1.15) * (down + 1.15) * 20 < 1;
  if (!isBody && !isHead) return;
  for (let channel = 0; channel < 3; channel++)
    pixels[at + channel] = isHead ? 150 - 25 * channel : tone * (1 - 0.15 * channel);
}

function paintCloud(pixels: Float32Array, at: number, across: number, down: number, tone: number): void {
  const added = tone * Math.exp(-2 * (across * across + down * down));
  for (let channel = 0; channel < 3; channel++)
    pixels[at + channel] = Math.min(250, (pixels[at + channel] as number) + added);
}
