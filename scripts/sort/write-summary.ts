import type { Board, BoardStack } from "@/lib/board/model";
import { withPresentNames } from "@/lib/board/present-names";
import { rowLetters, tileName } from "@/lib/board/tile-name";
import type { FoundFiles } from "./collect-files";

/** Wider grids are counted and not drawn: a line of a terminal holds no more. */
const MOST_COLUMNS_DRAWN = 40;
const MOST_QUESTIONS_LISTED = 20;

/** What a person wants to know at the end, in plain lines. */
export function writeSummary(board: Board, found: FoundFiles, seconds: number): string {
  const loose = board.frames.filter((frame) => frame.stackId === null);
  const aside = board.frames.filter((frame) => frame.stackId !== null && frame.setAside !== null);
  const { rows, columns, shotOrder, longestPauseSeconds } = board.grid;
  const lines = [
    `${board.projectName}: ${count(board.frames.length, "frame")} in ${count(board.stacks.length, "stack")}, ` +
      `${count(rows, "row")} of ${columns}.`,
    "",
    ...drawGrid(board),
    ...(shotOrder
      ? [`Shot along ${shotOrder.along} from the ${shotOrder.from}${shotOrder.turns ? ", back and forth" : ""}.`]
      : []),
    ...(longestPauseSeconds === null ? [] : [`Longest pause inside a tile: ${longestPauseSeconds.toFixed(1)} s.`]),
    `Set aside: ${aside.length}. Loose: ${loose.length}${listNames(loose.map((frame) => frame.name))}.`,
    ...describeFiles(board, found),
    "",
    ...listQuestions(board),
    `Took ${seconds.toFixed(1)} s.`,
  ];
  return `${lines.join("\n")}\n`;
}

function count(number: number, noun: string): string {
  return `${number} ${noun}${number === 1 ? "" : "s"}`;
}

function listNames(names: readonly string[]): string {
  if (names.length === 0) return "";
  return ` (${names.slice(0, 8).join(", ")}${names.length > 8 ? " and more" : ""})`;
}

/** Each tile with its frames in use; a small + where it was shot again, a dot for a hole. */
function drawGrid({ grid, stacks, frames }: Board): string[] {
  if (grid.rows === 0) return [];
  if (grid.columns > MOST_COLUMNS_DRAWN) return ["(The grid is too wide to be drawn here.)", ""];
  const inUse = new Map<string, number>();
  for (const frame of frames) {
    if (frame.stackId && frame.setAside === null) inUse.set(frame.stackId, (inUse.get(frame.stackId) ?? 0) + 1);
  }
  const tiles = new Map<string, BoardStack[]>();
  for (const stack of stacks) {
    if (!stack.row || !stack.column) continue;
    const name = tileName(stack.row, stack.column);
    tiles.set(name, [...(tiles.get(name) ?? []), stack]);
  }
  const cell = (row: number, column: number): string => {
    const takes = tiles.get(tileName(row, column)) ?? [];
    const chosen = takes.find((stack) => stack.isChosenTake);
    if (!chosen) return "·";
    return `${inUse.get(chosen.id) ?? 0}${takes.length > 1 ? "+" : ""}`;
  };
  const numbers = Array.from({ length: grid.columns }, (_, at) => at + 1);
  const line = (head: string, cells: readonly string[]): string =>
    `  ${head.padStart(3)} ${cells.map((text) => text.padStart(4)).join("")}`;
  return [
    line("", numbers.map(String)),
    ...Array.from({ length: grid.rows }, (_, at) =>
      line(
        rowLetters(at + 1),
        numbers.map((column) => cell(at + 1, column)),
      ),
    ),
    "",
  ];
}

function describeFiles({ unreadable, duplicates }: Board, { hidden, links, others, closed }: FoundFiles): string[] {
  const left = [
    ...(hidden > 0 ? [`${hidden} hidden`] : []),
    ...(links > 0 ? [count(links, "symbolic link")] : []),
    ...(others > 0 ? [`${others} not pictures`] : []),
    ...(closed > 0 ? [`${closed} folders that may not be read`] : []),
  ];
  return [
    ...(duplicates.length > 0 ? [`Files that are here twice: ${duplicates.length}.`] : []),
    ...(left.length > 0 ? [`Files not taken: ${left.join(", ")}.`] : []),
    ...(unreadable.length > 0 ? ["Could not be read:"] : []),
    ...unreadable.map(({ name, folder, reason }) => `  ${folder === null ? "" : `${folder}/`}${name}: ${reason}`),
  ];
}

function listQuestions(board: Board): string[] {
  const { questions } = withPresentNames(board);
  if (questions.length === 0) return ["No questions."];
  const rest = questions.length - MOST_QUESTIONS_LISTED;
  return [
    `${count(questions.length, "question")}:`,
    ...questions.slice(0, MOST_QUESTIONS_LISTED).map(({ message, evidence }) => `  ${message} ${evidence}`),
    ...(rest > 0 ? [`  and ${rest} more`] : []),
  ];
}

/** Why a frame is where it is; a line saying so where there is no such frame. */
export function explainFrame(board: Board, name: string): string {
  const { frames, stacks } = withPresentNames(board);
  const wanted = name.toLowerCase();
  const found = frames.filter((frame) =>
    [frame.name, ...frame.files.map((file) => file.name)].some((text) => text.toLowerCase() === wanted),
  );
  if (found.length === 0) return `There is no frame named ${name}.\n`;
  return found
    .map((frame) => {
      const stack = stacks.find((candidate) => candidate.id === frame.stackId);
      const tile = stack?.row && stack.column ? tileName(stack.row, stack.column) : null;
      const where = stack ? `in ${tile ?? "a stack without a place"}` : "loose";
      const aside = frame.setAside === null ? "" : `, set aside as ${frame.setAside}`;
      const sure = `${Math.round(frame.confidence * 100)} % sure`;
      return `${frame.name} is ${where}${aside}. ${frame.reason} (${sure})${stack ? ` ${stack.reason}` : ""}\n`;
    })
    .join("");
}
