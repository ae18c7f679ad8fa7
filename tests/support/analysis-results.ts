import type { AnalysisResult } from "@/lib/frames/writes";

/** What the analysis of some picture with these bytes could have found. */
export function pictureResult(sha256: string): AnalysisResult {
  return {
    type: "picture",
    sha256,
    mediaType: "image/jpeg",
    metadata: {
      takenAt: null,
      make: null,
      model: null,
      serial: null,
      lens: null,
      exposureSeconds: null,
      aperture: null,
      iso: null,
      focalLengthMm: null,
      orientation: 1,
    },
    measurements: {
      widthPx: 600,
      heightPx: 400,
      laplacianVariance: 100,
      meanBrightness: 100,
      texture: 1,
      patches: { columns: 1, rows: 1, full: [1], half: [1], brightness: [100] },
    },
  };
}
