import type { Board, BoardFrame, BoardQuestion, BoardSeam, BoardStack } from "@/lib/board/model";

export interface BoardRecipe {
  readonly rows: number;
  readonly columns: number;
  readonly framesPerTile: number;
  /** Places left empty, "row,column". */
  readonly holes?: readonly string[];
  readonly looseFrames?: number;
}

const FRAME = { widthPx: 1500, heightPx: 1000 };
const STEP = { xPx: 1000, yPx: 660 };
const START_MS = Date.UTC(2026, 4, 9, 9, 41, 12);
/** Noise that is the same in every run: the fractional part of a sine. 0 to 1. */
const wave = (seed: number) => Math.abs(Math.sin(seed * 12.9898) * 43758.5453) % 1;

/** A board as the computation would propose it for a shoot walked row by row; the same recipe gives the same board. */
export function makeBoard(recipe: BoardRecipe): Board {
  const { rows, columns, framesPerTile, holes = [], looseFrames = 0 } = recipe;
  const stacks: BoardStack[] = [];
  const frames: BoardFrame[] = [];
  let clockMs = START_MS;
  const add = (stackId: string | null, at: number) => {
    const pause = at === 0 ? 9 + Math.round(wave(frames.length) * 9) : 1 + Math.round(wave(frames.length) * 1.2);
    clockMs += pause * 1000;
    frames.push(makeFrame(frames.length, stackId, at, clockMs, frames.length === 0 ? null : pause));
  };
  for (let row = 1; row <= rows; row += 1) {
    for (let column = 1; column <= columns; column += 1) {
      if (holes.includes(`${row},${column}`)) continue;
      const id = `stack-${row}-${column}`;
      stacks.push(makeStack(id, row, column, `frame-${frames.length + 2}`));
      for (let at = 0; at < framesPerTile; at += 1) add(id, at);
    }
  }
  for (let at = 0; at < looseFrames; at += 1) add(null, at);
  return {
    projectId: "project-1",
    projectName: "Harbour front at low tide",
    revision: 1,
    grid: {
      rows,
      columns,
      shotOrder: { along: "rows", from: "top-left", turns: false },
      overlapWanted: 0.3,
      framesPerTile: { least: 4, most: 8 },
      longestPauseSeconds: 4,
    },
    stacks,
    frames,
    seams: makeSeams(stacks),
    questions: [],
    unreadable: [],
    duplicates: [],
  };
}

/** 3 rows of 6 tiles with everything that asks for a person: questions, a hole, a small overlap, a second take, loose frames. */
export function makeEventfulBoard(): Board {
  const board = makeBoard({ rows: 3, columns: 6, framesPerTile: 6, holes: ["2,5"], looseFrames: 4 });
  const frames = board.frames.map((frame) => {
    if (frame.id === "frame-8") return { ...frame, setAside: "soft" as const, relativeSharpness: 0.41 };
    if (frame.id === "frame-17")
      return { ...frame, shift: { xPx: 998, yPx: 4 }, relativeSharpness: null, confidence: 0.55 };
    if (["frame-66", "frame-67", "frame-69"].includes(frame.id))
      return { ...frame, setAside: "exposure" as const, relativeSharpness: 0.93 };
    if (frame.id === "frame-90") return { ...frame, setAside: "moved" as const };
    return frame;
  });
  const second: BoardStack = {
    ...makeStack("stack-3-6-take-2", 3, 6, "frame-101"),
    take: 2,
    isChosenTake: false,
  };
  const seams = board.seams.map((seam) => {
    if (seam.stackId === "stack-3-4" && seam.side === "right") return { ...seam, overlap: 0.21 };
    if (seam.stackId === "stack-1-2" && seam.side === "below") return { ...seam, overlap: 0.18 };
    return seam.stackId === "stack-1-5" && seam.side === "right" ? { ...seam, overlap: null } : seam;
  });
  return { ...board, frames, seams, stacks: [...board.stacks, second], questions: EVENTFUL_QUESTIONS };
}

const EVENTFUL_QUESTIONS: readonly BoardQuestion[] = [
  {
    id: "question-1",
    key: "between-stacks:frame-17",
    kind: "between-stacks",
    message: "Does HARB0019 belong to A4?",
    evidence: "It was taken 4 s after the rest of A3 and 2 s before A4, and it fits A4 to within 2 px.",
    frameIds: ["frame-17"],
    stackIds: ["stack-1-3", "stack-1-4"],
    tile: "A3",
    answers: [
      { label: "Move to A4", action: { type: "move-frames", frameIds: ["frame-17"], toStackId: "stack-1-4" } },
      { label: "Keep in A3", action: { type: "keep" } },
    ],
    severity: 0.9,
  },
  {
    id: "question-2",
    key: "few-frames:stack-3-1",
    kind: "few-frames",
    message: "Are 3 frames enough for C1?",
    evidence: "The project wants 4 at the least; 3 of its 6 frames are set aside as exposure.",
    frameIds: [],
    stackIds: ["stack-3-1"],
    tile: "C1",
    answers: [{ label: "Keep as it is", action: { type: "keep" } }],
    severity: 0.6,
  },
  {
    id: "question-3",
    key: "hole:2,5",
    kind: "hole",
    message: "Was B5 left out?",
    evidence: "No stack lies there, and the pause before B6 is no longer than the others.",
    frameIds: [],
    stackIds: [],
    tile: "B5",
    answers: [{ label: "Keep the hole", action: { type: "keep" } }],
    severity: 0.5,
  },
];

function makeStack(id: string, row: number, column: number, referenceId: string): BoardStack {
  const xPx = (column - 1) * STEP.xPx + (wave(row * 31 + column) - 0.5) * 12;
  const yPx = (row - 1) * STEP.yPx + (wave(row * 17 + column * 3) - 0.5) * 12;
  return {
    id,
    row,
    column,
    take: 1,
    isChosenTake: true,
    referenceId,
    isSettled: false,
    shareUserId: null,
    confidence: 0.97,
    reason: "Its picture meets its neighbours' within 3 px, and its turn in the walk is the same.",
    position: { xPx, yPx },
    spot: { x: 0.4, y: 0.55 },
    placedBy: "computation",
  };
}

function makeFrame(
  order: number,
  stackId: string | null,
  at: number,
  takenMs: number,
  pauseBeforeSeconds: number | null,
): BoardFrame {
  const name = `HARB${String(order + 2).padStart(4, "0")}`;
  return {
    id: `frame-${order}`,
    name,
    files: [
      {
        id: `file-${order}`,
        name: `${name}.JPG`,
        folder: "100HARB",
        bytes: 7_400_000 + order,
        sha256: order.toString(16).padStart(64, "0"),
        mediaType: "image/jpeg",
      },
    ],
    metadata: {
      takenAt: {
        local: new Date(takenMs).toISOString().slice(0, 19),
        localMs: takenMs,
        hasFraction: false,
        offsetMinutes: 120,
      },
      make: "Demo",
      model: "D1",
      serial: "1",
      lens: null,
      exposureSeconds: 1 / 250,
      aperture: 8,
      iso: 100,
      focalLengthMm: 105,
      orientation: 1,
    },
    ...FRAME,
    orderTaken: order,
    stackId,
    setAside: null,
    laplacianVariance: 300,
    meanBrightness: 118 + wave(order + 5) * 2,
    relativeSharpness: stackId === null ? null : at === 2 ? 1 : 0.9 + wave(order + 9) * 0.095,
    shift: stackId === null ? null : { xPx: (wave(order) - 0.5) * 6, yPx: (wave(order + 1) - 0.5) * 6 },
    pauseBeforeSeconds,
    confidence: stackId === null ? 0.4 : 0.98,
    reason:
      stackId === null
        ? "It fits no stack: the pictures before and after it show something else."
        : "It follows the frame before by less than the pause between stacks and shows the same view.",
    placedBy: "computation",
  };
}

function makeSeams(stacks: readonly BoardStack[]): BoardSeam[] {
  const byPlace = new Map(stacks.map((stack) => [`${stack.row},${stack.column}`, stack]));
  return stacks.flatMap((stack) => {
    const row = stack.row ?? 0;
    const column = stack.column ?? 0;
    const right = byPlace.get(`${row},${column + 1}`);
    const below = byPlace.get(`${row + 1},${column}`);
    const overlap = 0.33 + wave(row * 7 + column) * 0.02;
    return [
      ...(right ? [{ stackId: stack.id, neighbourId: right.id, side: "right" as const, overlap }] : []),
      ...(below ? [{ stackId: stack.id, neighbourId: below.id, side: "below" as const, overlap }] : []),
    ];
  });
}
