import { z } from "zod";
import { passwordProblem } from "@/lib/auth/password-rules";
import { singleLineSchema } from "@/lib/text/single-line";

/** RFC 5321, 4.5.3.1.3: a path is at most 256 octets with its angle brackets. */
const EMAIL_CHARACTERS = 254;
/** Long enough for any name a person signs with, short enough for a list. */
const NAME_CHARACTERS = 80;

/** Lower case: people sign in with it whatever the case. */
export const emailSchema = z
  .string("give an e-mail address")
  .transform((text) => text.trim().toLowerCase())
  .pipe(z.email("this is not an e-mail address").max(EMAIL_CHARACTERS, "this e-mail address is too long"));

export const personNameSchema = singleLineSchema(NAME_CHARACTERS);

/** A new account, from the first-account form or the command line. */
export const newAccountSchema = z
  .object({ email: emailSchema, name: personNameSchema, password: z.string("give a password") })
  .superRefine(({ email, name, password }, context) => {
    const problem = passwordProblem(password, [email, name]);
    if (problem) context.addIssue({ code: "custom", path: ["password"], message: problem });
  });

export type NewAccount = z.infer<typeof newAccountSchema>;
