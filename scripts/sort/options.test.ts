import { describe, expect, test } from "vitest";
import { parseCommand } from "./options";

describe("parseCommand", () => {
  test("folder and files are relative to where the command was given", () => {
    const command = parseCommand(["shoot", "--out", "m.json", "--table", "/tmp/t.csv"], "/home/x");
    expect(command).toMatchObject({ folder: "/home/x/shoot", outFile: "/home/x/m.json", tableFile: "/tmp/t.csv" });
  });

  test("settings are taken over", () => {
    const given =
      "a --overlap-wanted 0.4 --frames-per-tile 5-8 --longest-pause 3.5 --rows 3 --columns 6 --soft-limit=-0.3";
    expect(parseCommand(given.split(" "), "/")?.options).toEqual({
      overlapWanted: 0.4,
      framesPerTile: { least: 5, most: 8 },
      longestPauseSeconds: 3.5,
      expectedRows: 3,
      expectedColumns: 6,
      softLimit: -0.3,
    });
    expect(parseCommand(["a", "--frames-per-tile", "6"], "/")?.options.framesPerTile).toEqual({ least: 6, most: 6 });
  });

  test.each([
    ["", /Name the folder/],
    ["a b", /One folder at a time/],
    ["a --nonsense", /--nonsense/],
    ["a --out", /--out/],
    ["a --overlap-wanted 1", /from 0 to 0.95/],
    ["a --rows 1.5", /whole number/],
    ["a --jobs 0", /--jobs/],
    ["a --frames-per-tile 8-5", /N or N-M/],
    ["a --longest-pause soon", /number/],
  ])("%j is refused in one line", (given, message) => {
    const parse = () => parseCommand(given.split(" ").filter(Boolean), "/");
    expect(parse).toThrow(message);
    expect(parse).not.toThrow(/\n/);
  });

  test("help is help", () => expect(parseCommand(["--help"], "/")).toBeNull());
});
