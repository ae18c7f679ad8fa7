import { classNames } from "@/components/ui/class-names";

/** Between two stubs of a ticket: a dotted line between two punched half circles. Place it in a `relative` stub. */
export function Perforation() {
  // Each half circle hides the part of itself outside the ticket.
  const hole = "absolute -left-[7px] size-[13px] rounded-full border border-ink bg-paper";
  return (
    <span aria-hidden className="pointer-events-none">
      <span className={classNames(hole, "-top-[7px] [clip-path:inset(6px_0_0_0)]")} />
      <span className="absolute inset-y-2 left-[-1px] border-l-2 border-dotted border-line" />
      <span className={classNames(hole, "-bottom-[7px] [clip-path:inset(0_0_6px_0)]")} />
    </span>
  );
}
