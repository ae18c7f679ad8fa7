import { readFile } from "node:fs/promises";
import { createHash } from "node:crypto";
import { basename } from "node:path";
import { afterAll, describe, expect, test } from "vitest";

import { createAnalysisPool } from "@/lib/imaging/analysis-pool";
import { PictureError } from "@/lib/imaging/picture-error";
import { listShared } from "@/tests/support/shared-data";

// Malformed, truncated and crash-provoking pictures of the Pillow and image-rs projects (shared data, "broken").
const files = listShared("broken");

describe.skipIf(files.length === 0)("broken pictures (skipped where the shared data is absent)", () => {
  const pool = createAnalysisPool({ size: 2, longestSeconds: 30 });
  afterAll(() => pool.close());
  const none = { previewPath: null, thumbnailPath: null, registrationPath: null };

  test.each(files.map((path) => [basename(path), path]))("%s is read or refused with a reason", async (_name, path) => {
    const bytes = await readFile(path);
    const sha256 = createHash("sha256").update(bytes).digest("hex");
    const outcome: unknown = await pool.analyse({ path, ...none }).catch((error: unknown) => error);
    if (outcome instanceof PictureError) {
      expect(outcome.reason).toMatch(/^[A-Z].{20,}\.$/);
      // Not a crash and not a stop after the time: these decoders refuse in good order, so the hash is known.
      expect(outcome.file).toEqual({ sha256, bytes: bytes.length });
    } else {
      expect(outcome).toMatchObject({
        sha256,
        bytes: bytes.length,
        measurements: { widthPx: expect.any(Number) as number },
      });
    }
  });

  test("some are refused, and some that look broken can be read", async () => {
    const outcomes = await Promise.allSettled(files.map((path) => pool.analyse({ path, ...none })));
    const readable = outcomes.filter((outcome) => outcome.status === "fulfilled").length;
    expect(readable).toBeGreaterThan(5);
    expect(readable).toBeLessThan(30);
  });
});
