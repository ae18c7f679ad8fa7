import { gaussianBlur, motionBlur } from "./blur";
import type { FrameSize, Pose } from "./pose";
import type { Raster } from "./raster";
import { resample } from "./resample";
import { makeRandom, mixSeeds } from "./seeded-random";

/** How one frame is exposed. */
export interface Exposure {
  readonly pose: Pose;
  /** Deviation of a Gaussian at full size, px; 0 is in focus. */
  readonly softSigmaPx: number;
  readonly motion: { readonly lengthPx: number; readonly angleRad: number } | null;
  /** Brightness against the scene, stops. */
  readonly gainEv: number;
  /** Light lost in the corner through lens shading, stops, 0 or more. */
  readonly shadingEv: number;
  /** Deviation of the noise in mid grey, levels of 255. */
  readonly noiseLevels: number;
  readonly noiseSeed: number;
  /** Draws what moves (people, birds) before blur and noise; interleaved pixels of the frame. */
  readonly paint?: (pixels: Float32Array) => void;
}

/** A camera before one scene. Buffers are kept between frames; one camera takes one frame at a time. */
export interface Camera {
  readonly size: FrameSize;
  /** @returns red, green, blue interleaved, a new buffer for each frame */
  expose(exposure: Exposure): Buffer;
}

/** Levels are those of a screen: light is the level to this power. */
const SCREEN_GAMMA = 2.2;
const NORMALS = (() => {
  const random = makeRandom(20_240_229);
  return Float32Array.from({ length: 2048 }, () => random.normal());
})();

export function makeCamera(scene: Raster, size: FrameSize): Camera {
  const samples = size.widthPx * size.heightPx * 3;
  const pixels = new Float32Array(samples);
  // Few frames are blurred.
  let scratch: Float32Array | undefined;
  return {
    size,
    expose(exposure) {
      resample(scene, exposure.pose, size, pixels);
      exposure.paint?.(pixels);
      if (exposure.softSigmaPx > 0 || exposure.motion) scratch ??= new Float32Array(samples);
      if (exposure.softSigmaPx > 0 && scratch) gaussianBlur(pixels, size, exposure.softSigmaPx, scratch);
      if (exposure.motion && scratch) motionBlur(pixels, size, exposure.motion, scratch);
      return develop(pixels, size, exposure);
    },
  };
}

/** Deviation of the noise for each level: photons make it nearly even after the screen's curve, a little more in the dark. */
function noiseByLevel(noiseLevels: number): Float32Array {
  return Float32Array.from({ length: 256 }, (_, level) => noiseLevels * (0.8 + 0.55 * Math.exp(-level / 45)));
}

function develop(pixels: Float32Array, size: FrameSize, exposure: Exposure): Buffer {
  const { widthPx, heightPx } = size;
  const developed = Buffer.allocUnsafe(widthPx * heightPx * 3);
  const noise = noiseByLevel(exposure.noiseLevels);
  const gain = 2 ** (exposure.gainEv / SCREEN_GAMMA);
  const cornerLoss = 1 - 2 ** (-exposure.shadingEv / SCREEN_GAMMA);
  const cornerSquared = (widthPx * widthPx + heightPx * heightPx) / 4;
  let state = mixSeeds(exposure.noiseSeed, 77) | 1;
  for (let y = 0; y < heightPx; y++) {
    const down = y - heightPx / 2;
    for (let x = 0; x < widthPx; x++) {
      const across = x - widthPx / 2;
      const light = gain * (1 - (cornerLoss * (across * across + down * down)) / cornerSquared);
      // Xorshift (Marsaglia 2003): 32 fresh bits choose three of the stored normal numbers.
      state ^= state << 13;
      state ^= state >>> 17;
      state ^= state << 5;
      const at = (y * widthPx + x) * 3;
      developed[at] = expose1(light * (pixels[at] as number), noise, state & 2047);
      developed[at + 1] = expose1(light * (pixels[at + 1] as number), noise, (state >>> 11) & 2047);
      developed[at + 2] = expose1(light * (pixels[at + 2] as number), noise, (state >>> 21) & 2047);
    }
  }
  return developed;
}

function expose1(value: number, noise: Float32Array, normalIndex: number): number {
  const level = value < 0 ? 0 : value > 255 ? 255 : value;
  const noisy = level + (noise[level | 0] as number) * (NORMALS[normalIndex] as number);
  return noisy < 0 ? 0 : noisy > 255 ? 255 : (noisy + 0.5) | 0;
}
