import { describe, expect, test } from "vitest";
import { applyChanges } from "@/lib/board/changes";
import { boardFromProposal } from "@/lib/board/from-proposal";
import type { Board } from "@/lib/board/model";
import { sortFrames } from "@/lib/sorting/sort-frames";
import { pretendInput, pretendShoot } from "@/tests/support/accuracy/pretend-shoot";
import { manifestToCsv } from "./csv";
import { buildManifest } from "./manifest";
import { assertManifest } from "./validate-manifest";

const OPTIONS = { createdAt: "2026-12-01T09:00:00Z", hasProjectId: false };

async function makeBoard(): Promise<Board> {
  const plan = {
    rows: 2,
    columns: 3,
    framesPerTile: 4,
    order: { along: "rows", from: "top-left", turns: true } as const,
  };
  const shoot = pretendShoot({ ...plan, isMissing: (row, column) => row === 1 && column === 3 });
  const frames = shoot.map((frame, at) => (at === 2 ? { ...frame, sharpness: -0.7 } : frame));
  const { input, measurePair } = pretendInput(frames);
  const source = input.frames.map((frame, at) => ({
    ...frame,
    name: frame.name.slice(0, -4),
    files: [
      {
        id: `file-${at}`,
        name: frame.name,
        folder: at % 2 === 0 ? null : "=day 1",
        bytes: 1000 + at,
        sha256: String(at % 10).repeat(64),
        mediaType: "image/jpeg",
      },
    ],
  }));
  const board = boardFromProposal(
    {
      projectId: "p",
      projectName: "harbour",
      revision: 3,
      options: input.options,
      frames: source,
      unreadable: [{ name: "x.jpg", folder: null, bytes: 0, sha256: null, reason: "The file is empty (0 bytes)." }],
      duplicates: [{ name: "copy.jpg", folder: "copies", of: source[0]?.id ?? "" }],
    },
    await sortFrames(input, measurePair),
  );
  return board;
}

describe("buildManifest", () => {
  test("records stack and place of every frame, in use or not, and what came in besides", async () => {
    const manifest = buildManifest(await makeBoard(), OPTIONS);
    expect(manifest.grid).toMatchObject({ rows: 2, columns: 3, holes: ["A3"] });
    expect(manifest.frames).toHaveLength(20);
    expect(manifest.stacks.map(({ tile, frames, inUse }) => `${tile} ${frames} ${inUse}`)).toEqual([
      "A1 4 3",
      "A2 4 4",
      "B3 4 4",
      "B2 4 4",
      "B1 4 4",
    ]);
    expect(manifest.stacks[1]).toMatchObject({ noise: 0.5, merge: "mean", overlap: { right: null, above: null } });
    expect(manifest.stacks[1]?.overlap.left).toBeCloseTo(1 / 3, 2);
    expect(manifest.unreadable).toEqual([
      { name: "x.jpg", folder: null, bytes: 0, reason: "The file is empty (0 bytes)." },
    ]);
    expect(manifest.duplicates).toHaveLength(1);
    expect(manifest.toSettle.map(({ kind }) => kind)).toContain("hole");
  });

  test("what is to settle names the tiles as they are called now", async () => {
    const sorted = await makeBoard();
    const holes = (board: Board) =>
      buildManifest(board, OPTIONS).toSettle.flatMap(({ kind, message, tile }) =>
        kind === "hole" ? [[message, tile]] : [],
      );
    expect(holes(sorted)).toEqual([["Is a stack missing at A3?", "A3"]]);
    const board = applyChanges(sorted, [{ on: "line", axis: "row", at: 1, by: 1 }]);
    expect(holes(board)).toEqual([["Is a stack missing at B3?", "B3"]]);
    expect(JSON.stringify(buildManifest(board, OPTIONS))).not.toMatch(/\{(stack|tile|hole):/);
  });

  test("layers of a stack are at 100, 50 and 33 per cent; a frame set aside has none", async () => {
    // common practice: 100/k per cent for the k-th layer from the bottom.
    const { frames } = buildManifest(await makeBoard(), OPTIONS);
    const stack = frames.filter(({ tile }) => tile === "A1");
    expect(stack.map(({ order, layerOpacity, setAside }) => [order, layerOpacity, setAside])).toEqual([
      [1, 100, null],
      [2, 50, null],
      [3, null, "soft"],
      [4, 33.33, null],
    ]);
  });

  test("of a share: its stacks and frames, the whole grid and its holes", async () => {
    const board = await makeBoard();
    const shared = {
      ...board,
      stacks: board.stacks.map((stack, at) => ({ ...stack, shareUserId: at < 2 ? "user-1" : null })),
    };
    const mine = buildManifest(shared, { ...OPTIONS, share: { userId: "user-1" }, nameOfMember: () => "Ada" });
    expect(mine.stacks.map(({ tile, share }) => [tile, share])).toEqual([
      ["A1", "Ada"],
      ["A2", "Ada"],
    ]);
    expect(mine.frames).toHaveLength(8);
    expect(mine.grid).toMatchObject({ rows: 2, columns: 3, holes: ["A3"] });
    expect(buildManifest(shared, { ...OPTIONS, share: { userId: null } }).stacks).toHaveLength(3);
  });

  test("a manifest that breaks the schema is never written", async () => {
    const board = await makeBoard();
    expect(() => buildManifest(board, { ...OPTIONS, createdAt: "yesterday" })).toThrow(/createdAt/);
    expect(() => assertManifest({ manifest: "stackyard/2" })).toThrow(/not a valid manifest/);
  });
});

test("the table has one row a file and runs no formula", async () => {
  const lines = manifestToCsv(buildManifest(await makeBoard(), OPTIONS)).split("\r\n");
  expect(lines).toHaveLength(22);
  expect(lines[0]).toMatch(/^tile,row,column,take,order,folder,file,/);
  expect(lines[2]).toContain(",'=day 1,");
});
