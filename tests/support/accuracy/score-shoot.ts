import type { SortFrame, Proposal } from "@/lib/sorting/types";
import type { FrameTruth, ShootTruth } from "@/tests/support/shoots/shoot-truth";
import { adjustedRandIndex, pairwiseF1 } from "./adjusted-rand-index";

/** What a sorting got right of a shoot whose truth is known. */
export interface ShootScore {
  /** Every stack holds exactly its frames, and every stray is loose. */
  readonly areStacksExact: boolean;
  readonly f1: number;
  readonly ari: number;
  /** Stacks of the truth, and those found whole at their exact row and column. */
  readonly stacks: number;
  readonly placesExact: number;
  /** Absolute errors of the overlaps that were measured, in fractions of the side. */
  readonly overlapErrors: readonly number[];
  readonly seams: number;
  readonly strays: number;
  readonly straysHandled: number;
  /** Soft frames by how soft, and how many of each were set aside or asked about. */
  readonly soft: Readonly<
    Record<"0.5" | "0.7", { readonly all: number; readonly found: number; readonly aside: number }>
  >;
  readonly falselySoft: number;
  readonly deviating: number;
  readonly deviatingFound: number;
  readonly falselyDeviating: number;
  readonly questions: number;
  /** Frames whose stack, place or use is wrong, and how many of them a question names. */
  readonly wrong: number;
  readonly wrongAsked: number;
  readonly isShotOrderRight: boolean;
  /** What went wrong, for a person. */
  readonly faults: readonly string[];
  /** Confidence of every frame with its place, and whether it was right. */
  readonly reliability: readonly { readonly confidence: number; readonly isRight: boolean }[];
}

const LEAST_SOFT_PX = 0.45;
const CLEARLY_SOFT_PX = 0.68;

/** @param frames - what went into the sorting; their path tells which frame of the truth each is */
export function scoreShoot(
  truth: ShootTruth,
  frames: readonly (Pick<SortFrame, "id" | "folder"> & { readonly files: readonly { readonly name: string }[] })[],
  proposal: Proposal,
): ShootScore {
  const byFile = new Map(truth.frames.map((frame) => [frame.file, frame]));
  const truthOf = new Map<string, FrameTruth>();
  for (const frame of frames) {
    const file = `${frame.folder === null ? "" : `${frame.folder}/`}${frame.files[0]?.name ?? ""}`;
    const known = byFile.get(file);
    if (!known) throw new Error(`no truth for ${file}`);
    truthOf.set(frame.id, known.duplicateOf === null ? known : (byFile.get(known.duplicateOf) ?? known));
  }
  const rows = proposal.frames.map((frame) => ({ frame, truth: truthOf.get(frame.id) }));
  const stackById = new Map(proposal.stacks.map((stack) => [stack.id, stack]));
  const groupsTrue = rows.map(({ truth: t }, at) => (t?.stack === null ? `loose ${at}` : t?.stack));
  const groupsFound = rows.map(({ frame }, at) => frame.stackId ?? `loose ${at}`);
  const asked = new Set(
    proposal.questions.flatMap((question) => [
      ...question.frameIds,
      ...question.stackIds.flatMap((id) => stackById.get(id)?.frameIds ?? []),
    ]),
  );
  const found = new Map<number, { ids: Set<string | null>; size: number }>();
  for (const { frame, truth: t } of rows) {
    if (t?.stack === null || t?.stack === undefined) continue;
    const entry = found.get(t.stack) ?? { ids: new Set(), size: 0 };
    entry.ids.add(frame.stackId);
    entry.size++;
    found.set(t.stack, entry);
  }
  const faults: string[] = [];
  const isWhole = (stack: number): boolean => {
    const entry = found.get(stack);
    const [id] = entry?.ids ?? [];
    return entry?.ids.size === 1 && !!id && stackById.get(id)?.frameIds.length === entry.size;
  };
  let placesExact = 0;
  truth.stacks.forEach((stack, at) => {
    const [id] = found.get(at)?.ids ?? [];
    const proposed = id ? stackById.get(id) : undefined;
    const isPlaced = proposed?.row === stack.row && proposed?.column === stack.column;
    if (!isWhole(at)) faults.push(`stack ${stack.row},${stack.column} take ${stack.take} is in pieces or mixed`);
    else if (!isPlaced) faults.push(`stack ${stack.row},${stack.column} is at ${proposed?.row},${proposed?.column}`);
    if (isWhole(at) && isPlaced) placesExact++;
  });
  const strays = rows.filter(({ truth: t }) => t?.stray);
  const straysHandled = strays.filter(({ frame }) => frame.stackId === null || frame.setAside || asked.has(frame.id));
  for (const { frame, truth: t } of strays) if (frame.stackId) faults.push(`stray ${t?.file} is in a stack`);
  const isSoftStack = (t: FrameTruth) => t.stack !== null && truth.stacks[t.stack]?.isSoft === true;
  const isBlank = (t: FrameTruth) => t.stack !== null && truth.stacks[t.stack]?.isBlank === true;
  const softRows = rows.flatMap(({ frame, truth: t }) =>
    t && !isSoftStack(t) && !isBlank(t) && t.stack !== null && (truth.stacks[t.stack]?.files.length ?? 0) >= 3
      ? [{ frame, t, isSoft: t.softSigmaPx >= LEAST_SOFT_PX }]
      : [],
  );
  const soft = (least: number, most: number) => {
    const all = softRows.filter(({ t }) => t.softSigmaPx >= least && t.softSigmaPx < most && t.deviation === null);
    return {
      all: all.length,
      found: all.filter(({ frame }) => frame.setAside === "soft" || asked.has(frame.id)).length,
      aside: all.filter(({ frame }) => frame.setAside === "soft").length,
    };
  };
  const falselySoft = softRows.filter(({ frame, isSoft }) => frame.setAside === "soft" && !isSoft);
  for (const { t } of falselySoft) faults.push(`${t.file} is set aside as soft and is not`);
  for (const { frame, t } of softRows) {
    if (t.softSigmaPx >= CLEARLY_SOFT_PX && frame.setAside === null)
      faults.push(`${t.file} is soft by ${t.softSigmaPx.toFixed(2)} px and in use`);
  }
  const ASIDE = { exposure: "exposure", "focal-length": "moved", framing: "moved" } as const;
  const deviating = rows.filter(({ truth: t }) => t?.deviation);
  const deviatingFound = deviating.filter(({ frame, truth: t }) => {
    return (t?.deviation && frame.setAside === ASIDE[t.deviation]) || asked.has(frame.id);
  });
  const falselyDeviating = rows.filter(({ frame, truth: t }) => {
    return (frame.setAside === "moved" || frame.setAside === "exposure") && !t?.deviation && frame.stackId;
  });
  for (const { frame, truth: t } of falselyDeviating) faults.push(`${t?.file} is set aside as ${frame.setAside}`);
  const isRight = rows.map(({ frame, truth: t }) => {
    if (!t || t.stack === null) return frame.stackId === null || frame.setAside !== null;
    const stack = frame.stackId ? stackById.get(frame.stackId) : undefined;
    return isWhole(t.stack) && stack?.row === t.row && stack?.column === t.column;
  });
  const wrong = rows.filter((_, at) => !isRight[at]);
  const seamErrors = truth.seams.flatMap((seam) => {
    const here = proposal.stacks.filter((stack) => stack.row === seam.row && stack.column === seam.column);
    const match = proposal.seams.find(
      (other) => here.some((stack) => stack.id === other.stackId) && other.side === seam.side,
    );
    return match?.overlap === null || match?.overlap === undefined
      ? []
      : [Math.abs(match.overlap - Math.max(0, seam.overlap))];
  });
  return {
    areStacksExact:
      truth.stacks.every((_, at) => isWhole(at)) &&
      strays.every(({ frame }) => frame.stackId === null || frame.setAside),
    f1: pairwiseF1(groupsTrue, groupsFound),
    ari: adjustedRandIndex(groupsTrue, groupsFound),
    stacks: truth.stacks.length,
    placesExact,
    overlapErrors: seamErrors,
    seams: truth.seams.length,
    strays: strays.length,
    straysHandled: straysHandled.length,
    soft: { "0.5": soft(LEAST_SOFT_PX, CLEARLY_SOFT_PX), "0.7": soft(CLEARLY_SOFT_PX, Infinity) },
    falselySoft: falselySoft.length,
    deviating: deviating.length,
    deviatingFound: deviatingFound.length,
    falselyDeviating: falselyDeviating.length,
    questions: proposal.questions.length,
    wrong: wrong.length,
    wrongAsked: wrong.filter(({ frame }) => asked.has(frame.id)).length,
    isShotOrderRight: JSON.stringify(truth.shotOrder) === JSON.stringify(proposal.shotOrder),
    faults,
    reliability: rows.flatMap(({ frame }, at) => {
      const stack = frame.stackId ? stackById.get(frame.stackId) : undefined;
      return stack ? [{ confidence: Math.min(frame.confidence, stack.confidence), isRight: isRight[at] === true }] : [];
    }),
  };
}
