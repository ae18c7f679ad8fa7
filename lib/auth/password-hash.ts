import "server-only";
import { type Algorithm, hash, verify } from "@node-rs/argon2";

/** OWASP Password Storage Cheat Sheet (from memory): argon2id, 19 MiB, 2 passes, 1 lane. */
const OPTIONS = { algorithm: 2 satisfies Algorithm.Argon2id, memoryCost: 19_456, timeCost: 2, parallelism: 1 };

/** NFKC, so that the same password typed on another keyboard is the same (NIST SP 800-63B). */
function normalise(password: string): string {
  return password.normalize("NFKC");
}

/** @returns argon2id, PHC string */
export function hashPassword(password: string): Promise<string> {
  return hash(normalise(password), OPTIONS);
}

let decoy: Promise<string> | undefined;

/** @param stored null: there is no such account; takes as long as a wrong password, so that the answer does not tell */
export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword("there is no such account");
  const matches = await verify(stored ?? (await decoy), normalise(password));
  return stored !== null && matches;
}
