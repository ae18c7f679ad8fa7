// The process that reads pictures. Damaged files can crash, hang or exhaust a decoder: here they take only this
// process with them. Started by analysis-pool.ts.
import { writeFileSync } from "node:fs";

import { analysePicture } from "@/lib/imaging/analyse-picture";
import type { AnalysisReply, AnalysisRequest } from "@/lib/imaging/analysis-messages";
import { PictureError } from "@/lib/imaging/picture-error";

/** The first process that Linux ends when memory runs out should be this one, not the worker or the web. */
const OUT_OF_MEMORY_SCORE = "800";

function send(reply: AnalysisReply): void {
  process.send?.(reply);
}

async function answer({ task }: AnalysisRequest): Promise<AnalysisReply> {
  try {
    return { type: "done", picture: await analysePicture(task) };
  } catch (error) {
    if (error instanceof PictureError) {
      return { type: "refused", code: error.code, reason: error.reason, file: error.file };
    }
    return { type: "failed", message: error instanceof Error ? error.message : String(error) };
  }
}

try {
  writeFileSync("/proc/self/oom_score_adj", OUT_OF_MEMORY_SCORE);
} catch {
  // Not Linux, or not allowed: memory is then shared out as the system likes.
}
// Ctrl-C reaches the whole group: the parent decides, and it may still want the picture under way.
process.on("SIGINT", () => undefined);
// The parent is gone. Not process.exit: that would wait for a decoder that hangs in its own thread.
process.on("disconnect", () => process.kill(process.pid, "SIGKILL"));
process.on("message", (request: AnalysisRequest) => {
  void answer(request).then(send);
});
send({ type: "ready" });
