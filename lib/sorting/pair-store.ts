import type { PairMeasure } from "@/lib/analysis/types";
import type { MeasurePair, SortFrame } from "./types";

/** Pairs asked for at once: enough to keep a pool of workers busy, few enough to hold no pictures up. */
const ASKED_AT_ONCE = 32;

export type Pair = readonly [string, string];

/**
 * The pair measurements made so far. Every pair is measured once and in one order of its ids, whichever way round
 * it is asked for, so that the result cannot depend on the order of the input.
 */
export class PairStore {
  private readonly known = new Map<string, PairMeasure>();
  private readonly turned = new Set<string>();
  private readonly frames: ReadonlyMap<string, SortFrame>;

  constructor(
    frames: readonly SortFrame[],
    private readonly measurePair: MeasurePair,
  ) {
    this.frames = new Map(frames.map((frame) => [frame.id, frame]));
  }

  /** Measures what is not known yet, several at once. */
  async measureAll(pairs: readonly Pair[], onDone?: (done: number, total: number) => void): Promise<void> {
    const missing = new Map<string, Pair>();
    for (const [a, b] of pairs) {
      const key = keyOf(a, b);
      if (a !== b && !this.known.has(key)) missing.set(key, a < b ? [a, b] : [b, a]);
    }
    const queue = [...missing.entries()];
    let done = 0;
    const next = async (): Promise<void> => {
      for (let entry = queue.pop(); entry; entry = queue.pop()) {
        const [key, [a, b]] = entry;
        this.known.set(key, await this.measurePair(a, b));
        onDone?.(++done, missing.size);
      }
    };
    queue.reverse();
    await Promise.all(Array.from({ length: Math.min(ASKED_AT_ONCE, queue.length) }, next));
  }

  /** Looks at pairs once more, for frames turned against each other; what is found replaces what was known. */
  async measureTurned(pairs: readonly Pair[]): Promise<void> {
    const queue = pairs
      .map(([a, b]): Pair => (a < b ? [a, b] : [b, a]))
      .filter(([a, b]) => !this.turned.has(keyOf(a, b)));
    queue.reverse();
    const next = async (): Promise<void> => {
      for (let pair = queue.pop(); pair; pair = queue.pop()) {
        const [a, b] = pair;
        this.turned.add(keyOf(a, b));
        this.known.set(keyOf(a, b), await this.measurePair(a, b, "turned"));
      }
    };
    await Promise.all(Array.from({ length: Math.min(ASKED_AT_ONCE, queue.length) }, next));
  }

  async measure(a: string, b: string): Promise<PairMeasure> {
    await this.measureAll([[a, b]]);
    const found = this.find(a, b);
    if (!found) throw new Error(`pair ${a}, ${b} was not measured`);
    return found;
  }

  /** What was measured of b against a; null where the pair was never asked for. */
  find(a: string, b: string): PairMeasure | null {
    const found = this.known.get(keyOf(a, b));
    if (!found) return null;
    if (a < b) return found;
    // Shifts are in pixels of the first frame: the other one may be of another size.
    const from = this.frames.get(b)?.measurements.widthPx ?? 1;
    const to = this.frames.get(a)?.measurements.widthPx ?? 1;
    const turnRound = (shift: { readonly xPx: number; readonly yPx: number }) => ({
      xPx: (-shift.xPx * to) / from + 0,
      yPx: (-shift.yPx * to) / from + 0,
    });
    const rivals = (found.rivals ?? []).map((rival) => ({ ...rival, ...turnRound(rival) }));
    return { ...found, ...turnRound(found), rivals };
  }
}

function keyOf(a: string, b: string): string {
  return a < b ? `${a} ${b}` : `${b} ${a}`;
}
