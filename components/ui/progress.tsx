import { classNames } from "@/components/ui/class-names";

interface ProgressProps {
  /** What is in progress, for those who do not see the bar. */
  readonly label: string;
  /** From 0 to `most`; null: under way, how far is not known. */
  readonly value: number | null;
  readonly most?: number;
  /** The value in words, such as "54 of 108 frames". */
  readonly text?: string;
  /** madder: it failed and stands still. */
  readonly tone?: "ink" | "madder";
  readonly size?: "regular" | "slim";
}

/** A bar that fills from the left. What it says is also written beside it: the bar alone never carries the news. */
export function Progress({ label, value, most = 100, text, tone = "ink", size = "regular" }: ProgressProps) {
  const share = value === null || most <= 0 ? 0 : Math.min(1, Math.max(0, value / most));
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={most}
      aria-valuenow={value ?? undefined}
      aria-valuetext={text}
      className={classNames("w-full border border-line bg-paper p-px", size === "slim" ? "h-2" : "h-3")}
    >
      <div
        className={classNames(
          "h-full origin-left",
          tone === "madder" ? "bg-madder" : "bg-ink",
          value === null && "animate-pulse opacity-40",
        )}
        style={{ width: value === null ? "100%" : `${share * 100}%` }}
      />
    </div>
  );
}
