import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

/** paper: a plain label; ochre: needs a decision; madder: loss or failure; ink: a mark, such as the reference. */
export type ChipTone = "paper" | "ochre" | "madder" | "ink";

const TONES: Record<ChipTone, string> = {
  paper: "bg-paper text-ink border-line",
  ochre: "bg-ochre-wash text-ochre-on border-ochre",
  madder: "bg-madder-wash text-madder-on border-madder",
  ink: "bg-ink text-paper border-ink",
};

/** A small label on paper of its own, so that it may lie on the well. */
export function Chip({ tone = "paper", children }: { readonly tone?: ChipTone; readonly children: ReactNode }) {
  return (
    <span
      className={classNames(
        "inline-flex items-center border px-1.5 text-sm leading-5 font-semibold whitespace-nowrap",
        TONES[tone],
      )}
    >
      {children}
    </span>
  );
}
