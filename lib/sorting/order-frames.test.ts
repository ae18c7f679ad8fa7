import { describe, expect, test } from "vitest";
import { pretendShoot, toSortFrame } from "@/tests/support/accuracy/pretend-shoot";
import { orderFrames } from "./order-frames";
import type { SortFrame } from "./types";

interface Given {
  readonly name: string;
  readonly folder?: string;
  readonly seconds?: number | null;
  readonly serial?: string | null;
}

function frames(given: readonly Given[]): SortFrame[] {
  const [plain] = pretendShoot({
    rows: 1,
    columns: 1,
    framesPerTile: 1,
    order: { along: "rows", from: "top-left", turns: false },
  });
  if (!plain) throw new Error("a shoot of one frame has one");
  return given.map(({ name, folder, seconds, serial }, at) =>
    toSortFrame(
      {
        ...plain,
        name,
        folder: folder ?? null,
        seconds: seconds === undefined ? at : seconds,
        serial: serial === undefined ? "1" : serial,
      },
      at,
    ),
  );
}

const names = (given: readonly Given[]) =>
  orderFrames([...frames(given)].reverse()).map((sequence) => sequence.frames.map(({ name }) => name));

describe("orderFrames", () => {
  test("folders with roll-over: 100/9997 to 9999, then 101/0001 on", () => {
    // check-values.md E36 (DCF).
    const given = [
      ...["9997", "9998", "9999"].map((number) => ({ name: `ABCD${number}`, folder: "100ABCDE" })),
      ...["0001", "0002", "0004"].map((number) => ({ name: `ABCD${number}`, folder: "101ABCDE" })),
    ];
    expect(names(given)).toEqual([given.map(({ name }) => name)]);
  });

  test("a roll-over within one folder", () => {
    expect(names([{ name: "ABCD9999" }, { name: "ABCD0001" }, { name: "ABCD0002" }])).toEqual([
      ["ABCD9999", "ABCD0001", "ABCD0002"],
    ]);
  });

  test("the counter goes before the clock, because clocks jump", () => {
    expect(
      names([
        { name: "ABCD0001", seconds: 100 },
        { name: "ABCD0002", seconds: 101 },
        { name: "ABCD0003", seconds: 2 },
        { name: "ABCD0004", seconds: 3 },
      ]),
    ).toEqual([["ABCD0001", "ABCD0002", "ABCD0003", "ABCD0004"]]);
  });

  test("two bodies are two sequences, whatever their clocks say", () => {
    expect(
      names([
        { name: "ABCD0001", serial: "1", seconds: 0 },
        { name: "ABCD0501", serial: "2", seconds: 1 },
        { name: "ABCD0002", serial: "1", seconds: 2 },
        { name: "ABCD0502", serial: "2", seconds: 3 },
      ]),
    ).toEqual([
      ["ABCD0001", "ABCD0002"],
      ["ABCD0501", "ABCD0502"],
    ]);
  });

  test("a frame that lost its EXIF stays with the body whose prefix and numbers it has", () => {
    expect(
      names([{ name: "ABCD0001" }, { name: "ABCD0002", serial: null, seconds: null }, { name: "ABCD0003" }]),
    ).toEqual([["ABCD0001", "ABCD0002", "ABCD0003"]]);
  });

  test("numbers that count twice, from two cards, go folder by folder in time", () => {
    expect(
      names([
        { name: "ABCD0001", folder: "card b", seconds: 0 },
        { name: "ABCD0002", folder: "card b", seconds: 1 },
        { name: "ABCD0001", folder: "card a", seconds: 50 },
        { name: "ABCD0002", folder: "card a", seconds: 51 },
      ]),
    ).toEqual([["ABCD0001", "ABCD0002", "ABCD0001", "ABCD0002"]]);
    const [sequence] = orderFrames(
      frames([
        { name: "ABCD0001", folder: "card b", seconds: 0 },
        { name: "ABCD0001", folder: "card a", seconds: 50 },
      ]),
    );
    expect(sequence?.frames.map(({ folder }) => folder)).toEqual(["card b", "card a"]);
  });

  test("names that are checksums are ordered by the clock; without one the order is not known", () => {
    const hashes = ["9af3c1", "01bb7d2", "7730e5", "c4d5e6f7", "5e11aa9"];
    expect(names(hashes.map((name) => ({ name })))).toEqual([hashes]);
    const [blind] = orderFrames(frames(hashes.map((name) => ({ name, seconds: null, serial: null }))));
    expect(blind?.isOrderKnown).toBe(false);
  });
});
