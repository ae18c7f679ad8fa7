import { expect, test } from "vitest";
import type { IntakeList } from "@/lib/frames/schema";
import { fileIdSchema, uploadIdSchema } from "@/lib/ids";
import { folderOf, sortChosenFiles } from "@/lib/uploads/chosen-files";

const NOTHING: IntakeList = { files: [], uploads: [], sortError: null };
// First bytes of a JPEG: SOI and APP0 (ITU-T T.81, annex B).
const JPEG = new Uint8Array([0xff, 0xd8, 0xff, 0xe0, 0, 16]);

function fileAt(path: string, content: BlobPart = "x", lastModified = 5): File {
  const file = new File([content], path.split("/").at(-1) ?? "", { lastModified });
  Object.defineProperty(file, "relativePath", { value: path });
  return file;
}

test("the folder is kept, relative to what was dropped", () => {
  expect(["./a.jpg", "/shoot/100HARB/a.jpg", "shoot/a.jpg", "a.jpg"].map((path) => folderOf(fileAt(path)))).toEqual([
    "",
    "shoot/100HARB",
    "shoot",
    "",
  ]);
});

test("pictures are sent, others are listed as not taken with the reason", async () => {
  const chosen = await sortChosenFiles(
    [
      fileAt("shoot/HARB0001.JPG"),
      fileAt("shoot/HARB0001.CR3"),
      fileAt("shoot/notes.txt"),
      fileAt("shoot/.hidden.jpg"),
      fileAt("shoot/noname", JPEG),
    ],
    NOTHING,
  );
  expect(chosen.outgoing.map(({ name }) => name)).toEqual(["HARB0001.CR3", "HARB0001.JPG", "noname"]);
  expect(chosen.notTaken).toEqual([
    { name: "notes.txt", folder: "shoot", reason: "not a picture" },
    { name: ".hidden.jpg", folder: "shoot", reason: "hidden file" },
  ]);
});

test("what is in already is not sent twice unless it was changed since, what broke off goes on", async () => {
  const known: IntakeList = {
    ...NOTHING,
    files: [
      {
        id: fileIdSchema.parse("file-1"),
        name: "a.jpg",
        folder: "shoot",
        bytes: 1,
        lastModifiedMs: 5,
        sha256: null,
        state: "analysed",
        reason: null,
        duplicateOf: null,
        isRaw: false,
        frameId: null,
        receivedAtMs: 0,
      },
    ],
    uploads: [
      {
        id: uploadIdSchema.parse("upload-1"),
        url: "/api/uploads/upload-1",
        name: "b.jpg",
        folder: null,
        lastModifiedMs: 5,
        bytes: 1,
        receivedBytes: 0,
        isMine: true,
        createdAtMs: 0,
      },
    ],
  };
  const chosen = await sortChosenFiles(
    [fileAt("shoot/a.jpg"), fileAt("shoot/a.jpg", "x", 6), fileAt("other/a.jpg"), fileAt("b.jpg")],
    known,
  );
  expect(chosen.alreadyIn).toBe(1);
  expect(chosen.outgoing.map(({ folder, name, uploadUrl }) => [folder, name, uploadUrl])).toEqual([
    ["", "b.jpg", "/api/uploads/upload-1"],
    ["other", "a.jpg", null],
    ["shoot", "a.jpg", null],
  ]);
});
