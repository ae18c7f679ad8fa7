import type { RegistrationImage } from "@/lib/analysis/types";

/**
 * Turns a picture about its middle; what comes into view at the corners repeats the border.
 * @param image - any size
 * @param angleRad - clockwise as seen, so that content at the right moves down
 * @returns a picture of the same size
 * Method and accuracy: bilinear, which smooths by at most half a pixel.
 * Edges: an angle of 0 gives the same levels; a picture of one pixel stays.
 */
export function turnImage(image: RegistrationImage, angleRad: number): RegistrationImage {
  const { data, widthPx, heightPx } = image;
  const turned = new Uint16Array(data.length);
  const [cos, sin] = [Math.cos(angleRad), Math.sin(angleRad)];
  const [midX, midY] = [(widthPx - 1) / 2, (heightPx - 1) / 2];
  for (let y = 0; y < heightPx; y += 1) {
    for (let x = 0; x < widthPx; x += 1) {
      const fromX = clamp(midX + cos * (x - midX) + sin * (y - midY), widthPx - 1);
      const fromY = clamp(midY - sin * (x - midX) + cos * (y - midY), heightPx - 1);
      const left = Math.min(Math.floor(fromX), Math.max(0, widthPx - 2));
      const top = Math.min(Math.floor(fromY), Math.max(0, heightPx - 2));
      const right = Math.min(left + 1, widthPx - 1);
      const below = Math.min(top + 1, heightPx - 1) * widthPx;
      const above = top * widthPx;
      const [shareX, shareY] = [fromX - left, fromY - top];
      const upper = (data[above + left] ?? 0) * (1 - shareX) + (data[above + right] ?? 0) * shareX;
      const lower = (data[below + left] ?? 0) * (1 - shareX) + (data[below + right] ?? 0) * shareX;
      turned[y * widthPx + x] = Math.round(upper * (1 - shareY) + lower * shareY);
    }
  }
  return { data: turned, widthPx, heightPx };
}

function clamp(value: number, most: number): number {
  return Math.min(most, Math.max(0, value));
}
