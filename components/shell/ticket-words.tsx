import { classNames } from "@/components/ui/class-names";
import type { TicketLine } from "@/components/shell/ticket-lines";

const TONES: Record<TicketLine["tone"], string> = {
  quiet: "text-quiet",
  ink: "text-quiet",
  ochre: "text-ochre font-semibold",
  madder: "text-madder font-semibold",
};

/** A step's one line. Where there is little room it breaks between the counts, not inside one. */
export function TicketWords({ line }: { readonly line: TicketLine }) {
  const parts = line.text.split(/(?<=,) /);
  return (
    <span className={classNames("figures block text-sm", TONES[line.tone])}>
      {parts.map((part, at) => (
        <span key={part}>
          {at > 0 && " "}
          <span className="inline-block">{part}</span>
        </span>
      ))}
    </span>
  );
}
