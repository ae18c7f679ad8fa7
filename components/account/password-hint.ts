import { PASSWORD_LEAST } from "@/lib/auth/password-rules";

/** The rules, before anything is wrong. */
export const PASSWORD_HINT = `At least ${PASSWORD_LEAST} characters, any you like: four or five words that do not belong together are easy to keep and hard to guess.`;
