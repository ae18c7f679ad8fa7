/** When a frame was taken, as the camera wrote it: local time and offset kept apart. */
export interface TakenAt {
  /** `YYYY-MM-DDTHH:MM:SS` with the fraction that the camera wrote, no offset. */
  readonly local: string;
  /** The local time as if it were UTC, in milliseconds (fraction included). */
  readonly localMs: number;
  /** False where the camera wrote whole seconds only. */
  readonly hasFraction: boolean;
  /** Minutes east of UTC; null where the camera wrote none. */
  readonly offsetMinutes: number | null;
}

/** EXIF orientation: 1 is upright as stored, 2 to 8 turn or mirror it (Exif 2.2, tag 0x0112). */
export type Orientation = 1 | 2 | 3 | 4 | 5 | 6 | 7 | 8;

/** What a picture file says of how it was taken. Null: not written, or not usable. */
export interface CaptureMetadata {
  readonly takenAt: TakenAt | null;
  readonly make: string | null;
  readonly model: string | null;
  readonly serial: string | null;
  readonly lens: string | null;
  readonly exposureSeconds: number | null;
  readonly aperture: number | null;
  readonly iso: number | null;
  readonly focalLengthMm: number | null;
  readonly orientation: Orientation;
}
