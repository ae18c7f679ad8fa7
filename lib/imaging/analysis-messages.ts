import type { AnalysedPicture, PictureTask } from "@/lib/imaging/analyse-picture";
import type { PictureErrorCode } from "@/lib/imaging/picture-error";

/** From the pool to a child: one picture at a time. */
export interface AnalysisRequest {
  readonly task: PictureTask;
}

/** From a child to the pool. */
export type AnalysisReply =
  /** Sent once, when the child has loaded and waits for its first picture. */
  | { readonly type: "ready" }
  | { readonly type: "done"; readonly picture: AnalysedPicture }
  | {
      readonly type: "refused";
      readonly code: PictureErrorCode;
      readonly reason: string;
      readonly file: { readonly sha256: string; readonly bytes: number } | null;
    }
  /** Not the picture's fault: the disk is full, the file is gone. */
  | { readonly type: "failed"; readonly message: string };
