import { uprightImage, uprightPatches, uprightSize } from "@/lib/analysis/orientation";
import { measurePatchSharpness } from "@/lib/analysis/patch-sharpness";
import { toLevels } from "@/lib/analysis/registration-image";
import { textureShare } from "@/lib/analysis/texture";
import type { FrameMeasurements, Plane, RegistrationImage } from "@/lib/analysis/types";
import type { Orientation } from "@/lib/metadata/types";

export interface MeasuredFrame {
  readonly measurements: FrameMeasurements;
  readonly registration: RegistrationImage;
}

/**
 * Everything the sorting needs to know of one frame's pixels, in one pass.
 * @param plane - green channel as stored, full size, 3 px a side or more
 * @param white - the plane's level of white: 255 or 65 535
 * @param orientation - how the stored picture is turned to be upright; the results are upright
 * @throws AnalysisError when the plane is malformed or too small
 * Method and accuracy: see `measurePatchSharpness` and `textureShare`; the mean is that of the registration image
 * before rounding, so it leaves out an odd last row or column.
 */
export function measureFrame(plane: Plane, white: number, orientation: Orientation): MeasuredFrame {
  const { laplacianVariance, patches, small } = measurePatchSharpness(plane, white);
  const registration = uprightImage(toLevels(small, white), orientation);
  const mean = small.data.reduce((sum, value) => sum + value, 0) / small.data.length;
  return {
    measurements: {
      ...uprightSize(plane.widthPx, plane.heightPx, orientation),
      laplacianVariance,
      meanBrightness: (mean * 255) / white,
      texture: textureShare(registration),
      patches: uprightPatches(patches, orientation),
    },
    registration,
  };
}
