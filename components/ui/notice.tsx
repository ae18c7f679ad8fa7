import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

/** plain: good to know; ochre: needs a decision; madder: something failed or was lost. */
export type NoticeTone = "plain" | "ochre" | "madder";

const TONES: Record<NoticeTone, string> = {
  plain: "border-ink bg-tray text-ink",
  ochre: "border-ochre bg-ochre-wash text-ochre-on",
  madder: "border-madder bg-madder-wash text-madder-on",
};

interface NoticeProps {
  readonly tone?: NoticeTone;
  /** What happened, in one sentence or less. */
  readonly title?: ReactNode;
  /** What to do next. */
  readonly children?: ReactNode;
  /** alert: appeared because of what the person just did and failed; status: appeared by itself; none: was there from the start. */
  readonly live?: "alert" | "status" | "none";
}

/** A message that stays until its cause is gone. */
export function Notice({ tone = "plain", title, children, live = "none" }: NoticeProps) {
  return (
    <div role={live === "none" ? undefined : live} className={classNames("border-l-4 px-4 py-3", TONES[tone])}>
      {title !== undefined && <p className="font-semibold">{title}</p>}
      {children !== undefined && <div className={classNames(title !== undefined && "mt-1")}>{children}</div>}
    </div>
  );
}
