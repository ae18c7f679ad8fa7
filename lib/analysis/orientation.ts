import type { PatchGrid, RegistrationImage } from "@/lib/analysis/types";
import type { Orientation } from "@/lib/metadata/types";

/** Whether width and height change places when the picture is shown upright: EXIF orientations 5 to 8. */
export function swapsSides(orientation: Orientation): boolean {
  return orientation >= 5;
}

/** Size as shown, of a size as stored. */
export function uprightSize(
  widthPx: number,
  heightPx: number,
  orientation: Orientation,
): { widthPx: number; heightPx: number } {
  return swapsSides(orientation) ? { widthPx: heightPx, heightPx: widthPx } : { widthPx, heightPx };
}

/**
 * For each place of the upright picture, row-major, the index of the stored one that is shown there.
 * @param columns - of the stored picture
 * @param rows - of the stored picture
 * Source: Exif 2.2, tag 0x0112: which corner of the scene the stored first row and column are.
 */
export function uprightOrder(columns: number, rows: number, orientation: Orientation): Int32Array {
  const size = uprightSize(columns, rows, orientation);
  const order = new Int32Array(columns * rows);
  for (let y = 0; y < size.heightPx; y += 1) {
    for (let x = 0; x < size.widthPx; x += 1) {
      const [storedX, storedY] = storedPlace(x, y, columns, rows, orientation);
      order[y * size.widthPx + x] = storedY * columns + storedX;
    }
  }
  return order;
}

/** Column and row of the stored picture that an upright place (x, y) shows. */
export function storedPlace(
  x: number,
  y: number,
  columns: number,
  rows: number,
  orientation: Orientation,
): readonly [number, number] {
  switch (orientation) {
    case 1:
      return [x, y];
    case 2:
      return [columns - 1 - x, y];
    case 3:
      return [columns - 1 - x, rows - 1 - y];
    case 4:
      return [x, rows - 1 - y];
    case 5:
      return [y, x];
    case 6:
      return [y, rows - 1 - x];
    case 7:
      return [columns - 1 - y, rows - 1 - x];
    case 8:
      return [columns - 1 - y, x];
  }
}

/** A registration image turned upright. */
export function uprightImage(image: RegistrationImage, orientation: Orientation): RegistrationImage {
  if (orientation === 1) return image;
  const order = uprightOrder(image.widthPx, image.heightPx, orientation);
  const data = Uint16Array.from(order, (stored) => image.data[stored] ?? 0);
  return { data, ...uprightSize(image.widthPx, image.heightPx, orientation) };
}

/** A grid of patches turned upright; the Laplacian is the same in all eight orientations. */
export function uprightPatches(grid: PatchGrid, orientation: Orientation): PatchGrid {
  if (orientation === 1) return grid;
  const order = [...uprightOrder(grid.columns, grid.rows, orientation)];
  const turned = (values: readonly number[]) => order.map((stored) => values[stored] ?? 0);
  const size = uprightSize(grid.columns, grid.rows, orientation);
  return {
    columns: size.widthPx,
    rows: size.heightPx,
    full: turned(grid.full),
    half: turned(grid.half),
    brightness: turned(grid.brightness),
  };
}
