import { createRequire } from "node:module";

interface Mat {
  readonly data64F: Float64Array;
  readonly data32F: Float32Array;
  roi(rectangle: unknown): Mat;
  delete(): void;
}

/** The part of opencv-js 4.5.2 that the tests use. */
export interface OpenCv {
  onRuntimeInitialized?: () => void;
  readonly CV_8UC1: number;
  readonly CV_64F: number;
  readonly BORDER_DEFAULT: number;
  readonly TM_CCOEFF_NORMED: number;
  readonly Mat: new () => Mat;
  readonly Rect: new (x: number, y: number, width: number, height: number) => unknown;
  matFromArray(rows: number, columns: number, type: number, data: ArrayLike<number>): Mat;
  Laplacian(from: Mat, to: Mat, depth: number, size: number, scale: number, delta: number, border: number): void;
  meanStdDev(from: Mat, mean: Mat, deviation: Mat): void;
  matchTemplate(picture: Mat, part: Mat, result: Mat, method: number): void;
  minMaxLoc(result: Mat): { readonly maxVal: number; readonly maxLoc: { readonly x: number; readonly y: number } };
}

let loading: Promise<{ cv: OpenCv }> | null = null;

/**
 * OpenCV, once in a process. Comes in a wrapper: the module has a `then` of its own that never ends, so it must be
 * neither awaited nor the value of a promise.
 */
export function loadOpenCv(): Promise<{ readonly cv: OpenCv }> {
  loading ??= new Promise((resolve) => {
    const cv = createRequire(import.meta.url)("@techstark/opencv-js") as OpenCv;
    if (typeof cv.Mat === "function") resolve({ cv });
    else cv.onRuntimeInitialized = () => resolve({ cv });
  });
  return loading;
}
