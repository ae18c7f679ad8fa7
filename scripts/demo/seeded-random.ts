/** Random numbers that depend on nothing but a seed. */
export interface SeededRandom {
  /** Uniform in [0, 1). */
  next(): number;
  /** Uniform in [low, high). */
  between(low: number, high: number): number;
  /** Whole number in [low, high], both included. */
  whole(low: number, high: number): number;
  /** Normal with mean 0 and deviation 1. */
  normal(): number;
  /** True with the given probability. */
  chance(probability: number): boolean;
  /** One of the values; throws where there is none. */
  pick<T>(values: readonly T[]): T;
}

function mixIn(hash: number, part: number): number {
  const once = Math.imul(hash ^ (part | 0), 0x85ebca6b);
  const twice = Math.imul(once ^ (once >>> 13), 0xc2b2ae35);
  return twice ^ (twice >>> 16);
}

const FIRST_HASH = 0x9e3779b9;

/** Mixes whole numbers into one 32-bit hash. Source: the finaliser of MurmurHash3 (public domain), from memory. */
export function mixSeeds(...parts: readonly number[]): number {
  return parts.reduce(mixIn, FIRST_HASH) >>> 0;
}

/** `mixSeeds` of three numbers without making a list of them: this one is called for every pixel. */
export function mixThree(a: number, b: number, c: number): number {
  return mixIn(mixIn(mixIn(FIRST_HASH, a), b), c) >>> 0;
}

/** Hash of a text, so that every named part of a scene has a stream of its own. */
export function seedFromText(text: string): number {
  return mixSeeds(...Array.from(text, (character) => character.codePointAt(0) ?? 0));
}

/**
 * A stream of random numbers.
 * @param seed - any whole number; the same seed gives the same stream on every machine
 * Source: the mulberry32 generator (public domain), from memory; normal numbers by Box and Muller (1958).
 */
export function makeRandom(seed: number): SeededRandom {
  let state = seed >>> 0;
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
  return {
    next,
    between: (low, high) => low + (high - low) * next(),
    whole: (low, high) => low + Math.floor(next() * (high - low + 1)),
    normal: () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
    chance: (probability) => next() < probability,
    pick: (values) => {
      const value = values[Math.floor(next() * values.length)];
      if (value === undefined) throw new Error("expected at least one value to pick from");
      return value;
    },
  };
}
