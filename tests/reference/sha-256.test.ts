import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";

import { analysePicture } from "@/lib/imaging/analyse-picture";
import { PictureError } from "@/lib/imaging/picture-error";

let folder = "";
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "stackyard-sha-"));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

/** The hash by which a stored file of these bytes is known, whether it is kept (raw) or refused. */
async function hashOf(name: string, content: string): Promise<string | undefined> {
  const path = join(folder, name);
  await writeFile(path, content);
  try {
    return (await analysePicture({ path, previewPath: null, thumbnailPath: null, registrationPath: null })).sha256;
  } catch (error) {
    if (error instanceof PictureError) return error.file?.sha256;
    throw error;
  }
}

test.each([
  // FIPS 180-4's examples (check-values.md 2.6).
  ["", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"],
  ["abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"],
  [
    "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
    "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1",
  ],
  ["a".repeat(1_000_000), "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0"],
])("a stored file is known by its SHA-256 (example %#)", async (content, expected) => {
  expect(await hashOf("refused.jpg", content)).toBe(expected);
  if (content !== "") expect(await hashOf("kept.dng", content)).toBe(expected);
});
