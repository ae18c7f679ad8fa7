import { softenLikeALens } from "../lens";
import type { Raster } from "../raster";
import { drawBoat, drawForeshoreThings, drawWaterMarks, planAfloat, planStranded } from "./boats";
import { Drawing } from "./drawing";
import { drawForeshore, waterEdge } from "./foreshore";
import { drawChurch, drawFarShore, drawHill } from "./hill";
import { drawFrontHouse, planFrontRow } from "./houses";
import { SCENE_SIZE } from "./layout";
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

async function layDrawing(raster: Raster, drawing: Drawing, grain: Grain): Promise<void> {
  const [colours, materials] = await Promise.all([drawing.renderColours(), drawing.renderMaterials()]);
  texturise(colours, materials, grain);
  layOver(raster, colours);
}

function drawTown(seed: number): Drawing {
  const drawing = new Drawing(SCENE_SIZE);
  drawFarShore(drawing, seed);
  drawHill(drawing, seed);
  drawChurch(drawing, 2480, 1010);
  for (const house of planFrontRow(seed)) drawFrontHouse(drawing, house);
  drawQuay(drawing, seed);
  drawQuayLife(drawing, seed);
  return drawing;
}

/**
 * Draws the invented harbour of the demo, down to the pixel: town, quay, foreshore with boats, water.
 * @param seed - whole number: same seed, same harbour
 * @returns a scene of `SCENE_SIZE`, as soft as a good lens would show it
 */
export async function drawHarbour(seed: number, onStep?: (step: string) => void): Promise<Raster> {
  const { widthPx, heightPx } = SCENE_SIZE;
  const raster: Raster = { data: new Uint8Array(widthPx * heightPx * 3), widthPx, heightPx };
  const grain = makeGrain(seed);
  drawSky(raster, seed);
  onStep?.("sky");
  await layDrawing(raster, drawTown(seed), grain);
  onStep?.("town");
  drawForeshore(raster, grain, seed);
  const ashore = new Drawing(SCENE_SIZE);
  drawForeshoreThings(ashore, seed);
  for (const boat of planStranded(seed)) drawBoat(ashore, boat, "whole");
  await layDrawing(raster, ashore, grain);
  onStep?.("foreshore");
  const afloat = planAfloat(seed);
  const mirrored = new Drawing(SCENE_SIZE);
  for (const boat of afloat) drawBoat(mirrored, boat, "mirrored");
  drawWater(raster, waterEdge(seed), await mirrored.renderColours(), seed);
  const upright = new Drawing(SCENE_SIZE);
  drawWaterMarks(upright, seed);
  for (const boat of afloat) drawBoat(upright, boat, "afloat");
  await layDrawing(raster, upright, grain);
  onStep?.("water");
  softenLikeALens(raster);
  return raster;
}
