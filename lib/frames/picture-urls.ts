import { CROP_MOST_PX } from "@/lib/frames/schema";

/** Upright, at most 320 px on the long side. */
export function thumbnailUrl(projectId: string, frameId: string): string {
  return `${frameUrl(projectId, frameId)}/thumbnail`;
}

/** Upright, at most 2 000 px on the long side. */
export function previewUrl(projectId: string, frameId: string): string {
  return `${frameUrl(projectId, frameId)}/preview`;
}

export interface CropRequest {
  /** Size of the upright frame, px. */
  readonly widthPx: number;
  readonly heightPx: number;
  /** Middle of what is wanted, upright full-size px. */
  readonly centreXPx: number;
  readonly centreYPx: number;
  /** Size wanted, px; cut down to the frame and to 2 048 px. */
  readonly cropWidthPx: number;
  readonly cropHeightPx: number;
}

/** A piece of the original at 100 %, pushed inside the frame where it would stick out. */
export function cropUrl(projectId: string, frameId: string, request: CropRequest): string {
  const w = Math.max(1, Math.min(Math.round(request.cropWidthPx), CROP_MOST_PX, request.widthPx));
  const h = Math.max(1, Math.min(Math.round(request.cropHeightPx), CROP_MOST_PX, request.heightPx));
  const x = Math.max(0, Math.min(Math.round(request.centreXPx - w / 2), request.widthPx - w));
  const y = Math.max(0, Math.min(Math.round(request.centreYPx - h / 2), request.heightPx - h));
  return `${frameUrl(projectId, frameId)}/crop?x=${x}&y=${y}&w=${w}&h=${h}`;
}

function frameUrl(projectId: string, frameId: string): string {
  return `/api/projects/${projectId}/frames/${frameId}`;
}
