import { leaningOf } from "./judge-pair";
import type { PauseLimit } from "./pause-limit";
import type { Join } from "./split-stacks";

// Chance that two frames were rightly joined or cut, by what it rests on. Our own, from the generated shoots with seeds
// 101 to 299, where of 6 000 pairs decided by pictures or clear time none was wrong; real ones are less tidy.
const BY_PERSON = 1;
const BY_BOTH = 0.998;
const BY_PICTURES = 0.985;
const AGAINST_CLEAR_TIME = 0.93;
const BY_CLEAR_TIME = 0.97;
const PROBABLY_DIFFERENT_UNTIMED = 0.9;
const PROBABLY_DIFFERENT_AGAINST_TIME = 0.7;
const BY_UNCLEAR_TIME = 0.65;
const BY_NOTHING = 0.55;
/** A time limit that errs on no more of the decided pairs is a good one. */
const GOOD_LIMIT_ERRORS = 0.05;
/** A pause within this factor of the limit says nothing. */
const UNCLEAR_FACTOR = 1.3;

/** Probability that the decision about two frames that follow each other is right, 0 to 1. */
export function joinChance(join: Join, limit: PauseLimit | null): number {
  const time = timeOf(join, limit);
  if (join.basis === "person") return BY_PERSON;
  if (join.basis === "nothing") return BY_NOTHING;
  if (join.verdict === "probably different" && !join.isSame) {
    if (time === "cut") return BY_BOTH;
    return time === "unclear" ? PROBABLY_DIFFERENT_UNTIMED : PROBABLY_DIFFERENT_AGAINST_TIME;
  }
  if (join.verdict === "same" || join.verdict === "different") {
    const isAgreed = time === (join.isSame ? "same" : "cut");
    if (isAgreed) return BY_BOTH;
    return time === "unclear" ? BY_PICTURES : AGAINST_CLEAR_TIME;
  }
  const leaning = leaningOf(join.measure, join.before);
  const isBacked = leaning === (join.isSame ? "alike" : "unlike");
  if (time === "unclear") return isBacked ? PROBABLY_DIFFERENT_UNTIMED : BY_UNCLEAR_TIME;
  return isBacked ? BY_PICTURES : BY_CLEAR_TIME;
}

/** What the pause alone says. */
function timeOf({ pauseS }: Join, limit: PauseLimit | null): "same" | "cut" | "unclear" {
  if (pauseS === null || limit === null || limit.errorShare > GOOD_LIMIT_ERRORS) return "unclear";
  if (pauseS > limit.seconds * UNCLEAR_FACTOR) return "cut";
  return pauseS < limit.seconds / UNCLEAR_FACTOR ? "same" : "unclear";
}
