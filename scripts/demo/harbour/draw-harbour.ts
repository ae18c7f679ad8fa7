import { softenLikeALens } from "../lens";
import { clampToByte, makeField, type Raster } from "../raster";
import { mixSeeds } from "../seeded-random";
import { addFractalNoise } from "../value-noise";
import { drawBoat, drawForeshoreThings, drawWaterMarks, planAfloat, planStranded } from "./boats";
import { HAZE } from "./colour";
import { Drawing } from "./drawing";
import { drawForeshore, waterEdge } from "./foreshore";
import { drawChurch, drawFarShore, drawHill } from "./hill";
import { drawFrontHouse, planFrontRow } from "./houses";
import { HORIZON_Y, SCENE_SIZE } from "./layout";
import { drawQuay, drawQuayLife } from "./quay";
import { drawSky } from "./sky";
import { type Grain, makeGrain, texturise } from "./textures";
import { drawWater } from "./water";

/** Lays a drawing over what is there. */
function layOver(raster: Raster, colours: Buffer): void {
  const pixels = raster.widthPx * raster.heightPx;
  for (let pixel = 0; pixel < pixels; pixel++) {
    const alpha = colours[pixel * 4 + 3] as number;
    if (alpha === 0) continue;
    for (let channel = 0; channel < 3; channel++) {
      const below = raster.data[pixel * 3 + channel] as number;
      const above = colours[pixel * 4 + channel] as number;
      raster.data[pixel * 3 + channel] = below + ((above - below) * alpha) / 255 + 0.5;
    }
  }
}

type Rendered = Promise<readonly [colours: Buffer, materials: Buffer]>;

/** Begins at once, on sharp's own threads. */
function render(drawing: Drawing): Rendered {
  const rendered = Promise.all([drawing.renderColours(), drawing.renderMaterials()]);
  // Told of where it is awaited; until then a failed one only waits.
  rendered.catch(() => undefined);
  return rendered;
}

async function layDrawing(raster: Raster, rendered: Rendered, grain: Grain): Promise<void> {
  const [colours, materials] = await rendered;
  texturise(colours, materials, grain);
  layOver(raster, colours);
}

function drawBackground(seed: number): Drawing {
  const drawing = new Drawing(SCENE_SIZE);
  drawFarShore(drawing, seed);
  drawHill(drawing, seed);
  drawChurch(drawing, 2480, 1010);
  return drawing;
}

function drawTown(seed: number): Drawing {
  const drawing = new Drawing(SCENE_SIZE);
  for (const house of planFrontRow(seed)) drawFrontHouse(drawing, house);
  drawQuay(drawing, seed);
  drawQuayLife(drawing, seed);
  return drawing;
}

/** The air between the hill and the quay: thin above, thick where the smoke and damp of the town hang. */
function hazeOver(raster: Raster): void {
  for (let y = 400; y < raster.heightPx; y++) {
    const share = 0.05 + 0.2 * Math.min(1, (y - 400) / (HORIZON_Y - 400)) ** 1.5;
    for (let x = 0; x < raster.widthPx; x++) {
      const at = (y * raster.widthPx + x) * 3;
      for (let channel = 0; channel < 3; channel++) {
        const level = raster.data[at + channel] as number;
        raster.data[at + channel] = level + share * ((HAZE[channel] ?? 0) - level);
      }
    }
  }
}

/** Cloud shadows wander over the town, the sun's side is warmer, and the tones get a photograph's curve. */
function light(raster: Raster, seed: number): void {
  const { widthPx, heightPx, data } = raster;
  const clouds = makeField(widthPx, 1);
  addFractalNoise(clouds, { cellPx: 1300, smallestCellPx: 160, strength: 0.09, gain: 0.5, seed: mixSeeds(seed, 991) });
  const curve = Float32Array.from({ length: 256 }, (_, level) => {
    const t = level / 255;
    return 255 * (t ** 0.9 + 0.015 * Math.sin(2 * Math.PI * (t - 0.5)));
  });
  for (let y = 0; y < heightPx; y++) {
    const ground = Math.min(1, Math.max(0, (y - 700) / 400));
    for (let x = 0; x < widthPx; x++) {
      const shadow = 1 + ground * (clouds.data[Math.min(widthPx - 1, Math.round(x + 0.35 * y) % widthPx)] as number);
      const warm = 1 + 0.03 * (1 - x / widthPx);
      const at = (y * widthPx + x) * 3;
      const red = (curve[data[at] as number] as number) * shadow * warm;
      const green = (curve[data[at + 1] as number] as number) * shadow;
      const blue = ((curve[data[at + 2] as number] as number) * shadow) / warm;
      const grey = 0.3 * red + 0.59 * green + 0.11 * blue;
      data[at] = clampToByte(red + SATURATION_LOSS * (grey - red));
      data[at + 1] = clampToByte(green + SATURATION_LOSS * (grey - green));
      data[at + 2] = clampToByte(blue + SATURATION_LOSS * (grey - blue));
    }
  }
}

/** Paint is never as bright outdoors as in its tin. */
const SATURATION_LOSS = 0.27;

/**
 * Draws the invented harbour of the demo, down to the pixel: town, quay, foreshore with boats, water.
 * @param seed - whole number: same seed, same harbour
 * @returns a scene of `SCENE_SIZE`, as soft as a good lens would show it
 */
export async function drawHarbour(seed: number): Promise<Raster> {
  const { widthPx, heightPx } = SCENE_SIZE;
  // Shared, so that several threads can take frames of it.
  const data = new Uint8Array(new SharedArrayBuffer(widthPx * heightPx * 3));
  const raster: Raster = { data, widthPx, heightPx };
  // Both are drawn while sky and grain are made here.
  const background = render(drawBackground(seed));
  const town = render(drawTown(seed));
  const grain = makeGrain(seed);
  drawSky(raster, seed);
  await layDrawing(raster, background, grain);
  hazeOver(raster);
  await layDrawing(raster, town, grain);
  drawForeshore(raster, grain, seed);
  const ashore = new Drawing(SCENE_SIZE);
  drawForeshoreThings(ashore, seed);
  for (const boat of planStranded(seed)) drawBoat(ashore, boat, "whole");
  await layDrawing(raster, render(ashore), grain);
  const afloat = planAfloat(seed);
  const mirrored = new Drawing(SCENE_SIZE);
  for (const boat of afloat) drawBoat(mirrored, boat, "mirrored");
  drawWater(raster, waterEdge(seed), await mirrored.renderColours(), seed);
  const upright = new Drawing(SCENE_SIZE);
  drawWaterMarks(upright, seed);
  for (const boat of afloat) drawBoat(upright, boat, "afloat");
  await layDrawing(raster, render(upright), grain);
  light(raster, seed);
  softenLikeALens(raster);
  return raster;
}
