/** Where the camera looks. Scene and frame are measured in px, x to the right, y down. */
export interface Pose {
  /** The point of the scene in the middle of the frame. */
  readonly centreXPx: number;
  readonly centreYPx: number;
  /** Clockwise turn of the camera. */
  readonly rollRad: number;
  /** Frame pixels for each pixel of the scene: 1, or the ratio of focal lengths. */
  readonly zoom: number;
  /** Barrel (negative) or pincushion (positive) at the corner of the frame, as a fraction of its half diagonal. */
  readonly distortion: number;
  /** Given: the scene is a map of angles (px = focalPx x angle) and the camera turns about one point. */
  readonly sphere: { readonly focalPx: number; readonly originXPx: number; readonly originYPx: number } | null;
}

export interface FrameSize {
  readonly widthPx: number;
  readonly heightPx: number;
}

export interface Point {
  readonly xPx: number;
  readonly yPx: number;
}

/** True where the frame is the scene moved sideways and nothing else. */
export function isPlainShift(pose: Pose): boolean {
  return pose.rollRad === 0 && pose.zoom === 1 && pose.distortion === 0 && pose.sphere === null;
}

/** The point of the scene that a point of the frame shows. */
export function frameToScene(pose: Pose, size: FrameSize, at: Point): Point {
  const halfDiagonal = Math.hypot(size.widthPx, size.heightPx) / 2;
  let x = at.xPx - size.widthPx / 2;
  let y = at.yPx - size.heightPx / 2;
  const radial = 1 + pose.distortion * ((x * x + y * y) / (halfDiagonal * halfDiagonal));
  x *= radial / pose.zoom;
  y *= radial / pose.zoom;
  const cos = Math.cos(pose.rollRad);
  const sin = Math.sin(pose.rollRad);
  const turnedX = cos * x - sin * y;
  const turnedY = sin * x + cos * y;
  if (pose.sphere === null) return { xPx: pose.centreXPx + turnedX, yPx: pose.centreYPx + turnedY };
  const { focalPx, originXPx, originYPx } = pose.sphere;
  const yaw = (pose.centreXPx - originXPx) / focalPx;
  const pitch = (pose.centreYPx - originYPx) / focalPx;
  const length = Math.hypot(turnedX, turnedY, focalPx);
  const down = (turnedY * Math.cos(pitch) + focalPx * Math.sin(pitch)) / length;
  const forward = (focalPx * Math.cos(pitch) - turnedY * Math.sin(pitch)) / length;
  const across = turnedX / length;
  return {
    xPx: originXPx + focalPx * (yaw + Math.atan2(across, forward)),
    yPx: originYPx + focalPx * Math.asin(down),
  };
}

/** The inverse of `frameToScene`, by fixed-point steps; good to 0.001 px for the small distortions used here. */
export function sceneToFrame(pose: Pose, size: FrameSize, at: Point): Point {
  let x = size.widthPx / 2 + (at.xPx - pose.centreXPx) * pose.zoom;
  let y = size.heightPx / 2 + (at.yPx - pose.centreYPx) * pose.zoom;
  for (let step = 0; step < 30; step++) {
    const reached = frameToScene(pose, size, { xPx: x, yPx: y });
    x += (at.xPx - reached.xPx) * pose.zoom * 0.9;
    y += (at.yPx - reached.yPx) * pose.zoom * 0.9;
  }
  return { xPx: x, yPx: y };
}
