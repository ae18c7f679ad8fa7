import Link from "next/link";
import { Perforation } from "@/components/shell/perforation";
import { ticketLines, type TicketStatus } from "@/components/shell/ticket-lines";
import { TicketWords } from "@/components/shell/ticket-words";

interface ProjectStubsProps {
  readonly project: { readonly id: string; readonly name: string; readonly status: TicketStatus };
}

const STUBS = [
  { view: "intake", title: "Bring in" },
  { view: "board", title: "Board" },
  { view: "handover", title: "Hand over" },
] as const;

/** The lower edge of a project's ticket: each step with how far it is, in the words of its own pages, and the way there. */
export function ProjectStubs({ project: { id, name, status } }: ProjectStubsProps) {
  const lines = ticketLines(status);
  return (
    <ul aria-label={`Steps of ${name}`} className="grid grid-cols-3 border-t border-ink">
      {STUBS.map(({ view, title }, index) => (
        <li key={view} className="relative min-w-0">
          {index > 0 && <Perforation />}
          <Link
            href={`/projects/${id}/${view}`}
            className="block h-full px-4 py-2 -outline-offset-4 hover:bg-tray max-sm:px-2"
          >
            <span className="block text-sm font-semibold">{title}</span>
            <TicketWords line={lines[view]} />
          </Link>
        </li>
      ))}
    </ul>
  );
}
