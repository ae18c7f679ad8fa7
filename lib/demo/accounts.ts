import type { Role } from "@/lib/auth/roles";

/** The invented people of the demo project. `.example` is reserved (RFC 2606): no message can ever reach anybody. */
export interface DemoAccount {
  readonly email: string;
  readonly name: string;
  readonly role: Role;
  /** What this person does in the demo project, for the sign-in page. */
  readonly task: string;
}

export const DEMO_ACCOUNTS: readonly DemoAccount[] = [
  { email: "mona@stackyard.example", name: "Mona Harl", role: "lead", task: "brings in, sets the limits, hands over" },
  { email: "jonas@stackyard.example", name: "Jonas Treve", role: "editor", task: "brings in frames and merges" },
  { email: "ines@stackyard.example", name: "Ines Okell", role: "viewer", task: "looks at everything, changes nothing" },
];

/** Public on purpose: printed at launch and offered on the sign-in page while the demo exists. */
export const DEMO_PASSWORD = "a-harbour-at-low-tide";
