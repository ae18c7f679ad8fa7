import { access, constants, mkdtemp, rm, stat, writeFile } from "node:fs/promises";
import { rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";

import { boardFromProposal } from "@/lib/board/from-proposal";
import type { Board } from "@/lib/board/model";
import { callerFolder } from "@/lib/env";
import { manifestToCsv } from "@/lib/handover/csv";
import { buildManifest } from "@/lib/handover/manifest";
import { analyseFiles } from "./sort/analyse-files";
import { collectFiles } from "./sort/collect-files";
import { parseCommand, USAGE, UsageError, type SortCommand } from "./sort/options";
import { makeProgress } from "./sort/progress";
import { sortAnalysed } from "./sort/sort-analysed";
import { explainFrame, writeSummary } from "./sort/write-summary";

async function main(): Promise<void> {
  const command = parseCommand(process.argv.slice(2), callerFolder());
  if (command === null) {
    process.stdout.write(USAGE);
    return;
  }
  await checkFolder(command.folder);
  await checkWritable(command.outFile);
  await checkWritable(command.tableFile);
  const temporary = await mkdtemp(path.join(tmpdir(), "stackyard-sort-"));
  const leave = (): never => {
    rmSync(temporary, { recursive: true, force: true });
    process.exit(130);
  };
  process.once("SIGINT", leave);
  process.once("SIGTERM", leave);
  try {
    await sortFolder(command, temporary);
  } finally {
    await rm(temporary, { recursive: true, force: true });
  }
}

async function sortFolder(command: SortCommand, temporary: string): Promise<void> {
  const started = performance.now();
  const found = await collectFiles(command.folder);
  const progress = makeProgress(process.stderr);
  const { frames, unreadable, duplicates } = await analyseFiles(found.pictures, {
    jobs: command.jobs,
    registrationFolder: temporary,
    onRead: (done) => progress.say(`Reading pictures: ${done} of ${found.pictures.length}`),
  });
  const proposal = await sortAnalysed(frames, command.options, ({ step, done, total }) =>
    progress.say(`Sorting, ${step}: ${done} of ${total}`),
  );
  progress.end();
  const board = boardFromProposal(
    {
      projectId: "",
      projectName: path.basename(command.folder) || command.folder,
      revision: 0,
      options: command.options,
      frames,
      unreadable,
      duplicates,
    },
    proposal,
  );
  await writeResults(board, command);
  process.stderr.write(writeSummary(board, found, (performance.now() - started) / 1000));
  if (command.explain !== null) process.stderr.write(explainFrame(board, command.explain));
}

async function writeResults(board: Board, { outFile, tableFile }: SortCommand): Promise<void> {
  const manifest = buildManifest(board, { createdAt: new Date().toISOString(), hasProjectId: false });
  const text = `${JSON.stringify(manifest, null, 2)}\n`;
  if (tableFile !== null) await writeFile(tableFile, manifestToCsv(manifest));
  if (outFile !== null) {
    await writeFile(outFile, text);
    return;
  }
  await new Promise<void>((resolve, reject) => {
    process.stdout.write(text, (error) => (error ? reject(error) : resolve()));
  });
}

async function checkFolder(folder: string): Promise<void> {
  const found = await stat(folder).catch(() => null);
  if (!found) throw new UsageError(`There is no folder ${folder}`);
  if (!found.isDirectory()) throw new UsageError(`${folder} is not a folder`);
  await access(folder, constants.R_OK | constants.X_OK).catch(() => {
    throw new UsageError(`The folder ${folder} may not be read`);
  });
}

/** Found out before the work and not after it. */
async function checkWritable(file: string | null): Promise<void> {
  if (file === null) return;
  const found = await stat(file).catch(() => null);
  if (found?.isDirectory()) throw new UsageError(`${file} is a folder; name a file to write to`);
  const place = found ? file : path.dirname(file);
  await access(place, constants.W_OK).catch(() => {
    throw new UsageError(`The file ${file} cannot be written`);
  });
  const parent = await stat(path.dirname(file)).catch(() => null);
  if (!parent?.isDirectory()) throw new UsageError(`The file ${file} cannot be written`);
}

try {
  await main();
} catch (error) {
  const isUsage = error instanceof UsageError;
  process.stderr.write(`${isUsage ? error.message : `The sorting failed: ${errorText(error)}`}\n`);
  process.exitCode = isUsage ? 2 : 1;
}

function errorText(error: unknown): string {
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
