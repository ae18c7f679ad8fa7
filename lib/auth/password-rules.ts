import { COMMON_WORDS } from "@/lib/auth/common-words";

/** NIST SP 800-63B revision 4: 15 characters where the password is the only factor; at least 64 must be possible. */
export const PASSWORD_LEAST = 15;
/** Far beyond any phrase; keeps hashing short. */
export const PASSWORD_MOST = 256;

/** Rows and columns of common keyboards, alphabet and digits: how the commonest long passwords are typed. */
const LINES = [
  "abcdefghijklmnopqrstuvwxyz",
  "01234567890123456789",
  "qwertyuiop",
  "asdfghjkl",
  "zxcvbnm",
  "qwertzuiop",
  "yxcvbnm",
  "azertyuiop",
  "qsdfghjklm",
  "wxcvbn",
  "1q2w3e4r5t6y7u8i9o0p",
  "q1w2e3r4t5y6u7i8o9p0",
  ..."1qaz 2wsx 3edc 4rfv 5tgb 6yhn 7ujm 8ik 9ol 0p".split(" "),
];
const RUNS = LINES.flatMap((line) => [line, [...line].reverse().join("")]);
const SHORTEST_RUN = 3;
/** What may stand beside words and runs and still leave the password easy to guess: a year, an exclamation mark. */
const SPARE_CHARACTERS = 4;

/**
 * Why a password is refused, in plain words; null: it may be used. No composition rules: only length and the commonest.
 * @param password counted in code points after NFKC (NIST SP 800-63B)
 * @param about what belongs to the account and is guessed first: e-mail, name
 */
export function passwordProblem(password: string, about: readonly string[]): string | null {
  const characters = [...password.normalize("NFKC")];
  if (characters.length < PASSWORD_LEAST) {
    return `Use at least ${PASSWORD_LEAST} characters; this has ${characters.length}. Four or five words that do not belong together do.`;
  }
  if (characters.length > PASSWORD_MOST) return `Use at most ${PASSWORD_MOST} characters.`;
  if (isCommon(characters.join(""), about)) {
    return "This is among the passwords that are guessed first: a common one, a pattern, or your own name or e-mail. Choose four or five words that do not belong together.";
  }
  return null;
}

function isCommon(password: string, about: readonly string[]): boolean {
  const plain = password.toLowerCase();
  if (isRepetition(plain)) return true;
  const letters = plain.replace(SIGNS, "");
  // Signs between the pieces do not make it harder to guess; where there is little else, they are the password.
  if (letters.length * 2 < plain.length) return false;
  if (isRepetition(letters)) return true;
  const own = about.flatMap((text) => text.toLowerCase().split(/[^\p{L}\p{N}]+/u)).filter((word) => word.length >= 3);
  const words = new Set([...COMMON_WORDS, ...own]);
  return [letters, readSubstitutes(plain)].some((text) => countOutside(text, words) <= SPARE_CHARACTERS);
}

/** ASCII punctuation and white space. */
const SIGNS = /[\s!-/:-@[-`{-~]/gu;

/** One piece of at most half the length, over and over, the last time perhaps cut short. */
function isRepetition(text: string): boolean {
  for (let period = 1; period * 2 <= text.length; period++) {
    if (text.startsWith(text.slice(period))) return true;
  }
  return false;
}

/** Digits and signs commonly written for letters. */
const SUBSTITUTES: Readonly<Record<string, string>> = {
  "0": "o", "1": "l", "3": "e", "4": "a", "5": "s", "7": "t", "@": "a", $: "s", "!": "i",
}; // prettier-ignore

function readSubstitutes(text: string): string {
  return [...text]
    .map((character) => SUBSTITUTES[character] ?? character)
    .join("")
    .replace(SIGNS, "");
}

/** The least number of characters left over when the text is covered with words, runs, years and repeated characters. */
function countOutside(text: string, words: ReadonlySet<string>): number {
  const longest = Math.max(...[...words].map((word) => word.length), 20);
  const best = [0];
  for (let end = 1; end <= text.length; end++) {
    let least = (best[end - 1] ?? 0) + 1;
    for (let start = Math.max(0, end - longest); start <= end - SHORTEST_RUN; start++) {
      const before = best[start] ?? 0;
      if (before < least && isKnown(text.slice(start, end), words)) least = before;
    }
    best.push(least);
  }
  return best[text.length] ?? 0;
}

function isKnown(piece: string, words: ReadonlySet<string>): boolean {
  return words.has(piece) || RUNS.some((run) => run.includes(piece)) || /^((.)\2+|(19|20)\d\d)$/u.test(piece);
}
