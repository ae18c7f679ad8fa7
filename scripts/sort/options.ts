import { availableParallelism } from "node:os";
import path from "node:path";
import { parseArgs } from "node:util";

import { DEFAULT_FRAMES_PER_TILE, DEFAULT_OVERLAP_WANTED } from "@/lib/projects/schema";
import { SOFT_LIMIT, type SortOptions } from "@/lib/sorting/types";

/** A mistake in how the command was given: one clear line, exit 2. */
export class UsageError extends Error {
  override readonly name = "UsageError";
}

export interface SortCommand {
  /** Absolute. */
  readonly folder: string;
  /** Absolute; null: standard output. */
  readonly outFile: string | null;
  /** Where to write the same as a table; null: not written. */
  readonly tableFile: string | null;
  /** Name of a frame whose placement is to be explained. */
  readonly explain: string | null;
  /** Pictures read at once. */
  readonly jobs: number;
  readonly options: SortOptions;
}

export const USAGE = `npm run --silent sort -- DIR [options]

Sorts the frames in DIR (sub-folders included) into stacks on a grid and writes the manifest as JSON.

  --out FILE             write the manifest to FILE instead of standard output
  --table FILE.csv       write one row a file as CSV as well
  --overlap-wanted N     share of a side that neighbours should share, 0 to 0.95 (${DEFAULT_OVERLAP_WANTED})
  --frames-per-tile N-M  fewest and most frames of a tile (${DEFAULT_FRAMES_PER_TILE.least}-${DEFAULT_FRAMES_PER_TILE.most})
  --longest-pause S      longest pause inside a tile, seconds (found by itself)
  --rows N, --columns N  rows and columns expected (found by themselves)
  --soft-limit=-N        log ratio of sharpness under which a frame is soft (${SOFT_LIMIT})
  --jobs N               pictures read at once (number of processors)
  --explain NAME         say on standard error why this frame is where it is
  --help                 this text
`;

/**
 * @param args - what follows the command's name
 * @param caller - folder that DIR and FILE are relative to
 * @returns null where help is asked for
 * @throws UsageError
 */
export function parseCommand(args: readonly string[], caller: string): SortCommand | null {
  const { values, positionals } = parse(args);
  if (values.help) return null;
  const [folder, ...rest] = positionals;
  if (folder === undefined) throw new UsageError("Name the folder to sort: npm run --silent sort -- DIR");
  if (rest.length > 0) throw new UsageError(`One folder at a time, please: ${rest.join(", ")} is too much.`);
  const full = (file: string | undefined) => (file === undefined ? null : path.resolve(caller, file));
  return {
    folder: path.resolve(caller, folder),
    outFile: full(values.out),
    tableFile: full(values.table),
    explain: values.explain ?? null,
    jobs: readNumber("--jobs", values.jobs, { least: 1, most: 64, isWhole: true }) ?? availableParallelism(),
    options: readOptions(values),
  };
}

function parse(args: readonly string[]) {
  const text = { type: "string" } as const;
  try {
    return parseArgs({
      args: [...args],
      allowPositionals: true,
      options: {
        out: text,
        table: text,
        explain: text,
        jobs: text,
        rows: text,
        columns: text,
        "overlap-wanted": text,
        "frames-per-tile": text,
        "longest-pause": text,
        "soft-limit": text,
        help: { type: "boolean" },
      },
    });
  } catch (error) {
    const message = error instanceof Error ? error.message.split(/[.\n]/)[0] : String(error);
    throw new UsageError(`${message}. Options: npm run --silent sort -- --help`);
  }
}

function readOptions(values: ReturnType<typeof parse>["values"]): SortOptions {
  const lines = { least: 1, most: 10_000, isWhole: true };
  return {
    overlapWanted:
      readNumber("--overlap-wanted", values["overlap-wanted"], { least: 0, most: 0.95 }) ?? DEFAULT_OVERLAP_WANTED,
    framesPerTile: readRange(values["frames-per-tile"]),
    longestPauseSeconds: readNumber("--longest-pause", values["longest-pause"], { least: 0.001, most: 86_400 }),
    expectedRows: readNumber("--rows", values.rows, lines),
    expectedColumns: readNumber("--columns", values.columns, lines),
    softLimit: readNumber("--soft-limit", values["soft-limit"], { least: -10, most: -0.001 }) ?? SOFT_LIMIT,
  };
}

interface Limits {
  readonly least: number;
  readonly most: number;
  readonly isWhole?: boolean;
}

function readNumber(name: string, text: string | undefined, { least, most, isWhole }: Limits): number | null {
  if (text === undefined) return null;
  const value = Number(text);
  const isFit = text.trim() !== "" && value >= least && value <= most && (!isWhole || Number.isInteger(value));
  if (!isFit)
    throw new UsageError(`${name} takes a ${isWhole ? "whole " : ""}number from ${least} to ${most}, not "${text}".`);
  return value;
}

function readRange(text: string | undefined): SortOptions["framesPerTile"] {
  if (text === undefined) return DEFAULT_FRAMES_PER_TILE;
  const [first, last] = /^(\d+)(?:-(\d+))?$/.exec(text)?.slice(1) ?? [];
  const [least, most] = [Number(first), Number(last ?? first)];
  if (!(least >= 1 && most >= least)) throw new UsageError(`--frames-per-tile takes N or N-M, not "${text}".`);
  return { least, most };
}
