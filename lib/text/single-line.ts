import { z } from "zod";

/** Control characters, line separators, lone surrogates, and the characters that turn the reading direction of what follows. */
const REFUSED = /[\p{Cc}\p{Cs}\u2028\u2029\u202A-\u202E\u2066-\u2069]/u;
const VISIBLE = /[\p{L}\p{N}\p{P}\p{S}]/u;

/**
 * A name on one line: composed (NFC), trimmed, 1 to `most` code points.
 * Characters that would hide or reorder what people read are refused, not dropped: two names could become one.
 */
export function singleLineSchema(most: number) {
  return z
    .string("give a text")
    .transform((text) => text.normalize("NFC").trim())
    .refine((text) => VISIBLE.test(text), "give at least one visible character")
    .refine((text) => [...text].length <= most, `at most ${most} characters`)
    .refine((text) => !REFUSED.test(text), "line breaks, control characters and direction overrides are not possible");
}
