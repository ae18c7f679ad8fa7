"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { usePathname } from "next/navigation";
import { Perforation } from "@/components/shell/perforation";
import { ticketLines, type TicketLine } from "@/components/shell/ticket-lines";
import { TicketProblem } from "@/components/shell/ticket-problem";
import { useProjectStatus } from "@/components/shell/use-project-status";
import { TicketWords } from "@/components/shell/ticket-words";
import { classNames } from "@/components/ui/class-names";
import { useOnline } from "@/components/ui/use-online";
import { useProjectEvents } from "@/lib/events/use-project-events";
import { progressQuery } from "@/lib/frames/queries";
import type { Progress } from "@/lib/frames/schema";
import type { ProjectStatus } from "@/lib/projects/schema";

// Only what is built: a view joins the ticket together with its page.
const STUBS = [
  { view: "intake", title: "Bring in" },
  { view: "board", title: "Board" },
  { view: "handover", title: "Hand over" },
] as const;

interface JobTicketProps {
  readonly projectId: string;
  /** Both as the server rendered them. */
  readonly progress: Progress;
  readonly status: ProjectStatus;
}

// Events say when something changed; asking now and then as well keeps an open page honest where they do not arrive.
const BUSY_POLL_MS = 4_000;
const IDLE_POLL_MS = 30_000;

/** Navigation and status at once: one perforated stub a step, each with one line saying how far it is. */
export function JobTicket({ projectId, progress, status }: JobTicketProps) {
  const pathname = usePathname();
  const { lines, problem } = useTicketLines({ projectId, progress, status });
  // Without a connection a strip of its own says so.
  const isOnline = useOnline();
  useProjectEvents(projectId);
  return (
    <>
      <nav aria-label="Job ticket" className="border-y border-ink">
        <ol className="grid grid-cols-3">
          {STUBS.map(({ view, title }, index) => {
            const href = `/projects/${projectId}/${view}`;
            const isHere = pathname === href || pathname.startsWith(`${href}/`);
            return (
              <li key={view} className="relative min-w-0">
                {index > 0 && <Perforation />}
                <Stub href={href} number={index + 1} title={title} line={lines[view]} isHere={isHere} />
              </li>
            );
          })}
        </ol>
      </nav>
      {problem && isOnline && <TicketProblem problem={problem} path={pathname} />}
    </>
  );
}

function useTicketLines({ projectId, progress, status }: JobTicketProps) {
  const intake = useQuery({
    ...progressQuery(projectId),
    initialData: progress,
    refetchInterval: ({ state }) => (isBusy(state.data) ? BUSY_POLL_MS : IDLE_POLL_MS),
  });
  const project = useProjectStatus(projectId, status, isBusy(intake.data) ? BUSY_POLL_MS : IDLE_POLL_MS);
  return { lines: ticketLines({ ...intake.data, ...project.status }), problem: intake.error ?? project.error };
}

function isBusy(progress: Progress | undefined): boolean {
  return progress !== undefined && progress.total > 0 && !(progress.sorted && progress.received === progress.total);
}

interface StubProps {
  readonly href: string;
  readonly number: number;
  readonly title: string;
  readonly line: TicketLine;
  readonly isHere: boolean;
}

function Stub({ href, number, title, line, isHere }: StubProps) {
  return (
    <Link
      href={href}
      aria-current={isHere ? "page" : undefined}
      className="group flex h-full items-center gap-x-4 px-3 py-2 -outline-offset-4 hover:bg-tray sm:px-5"
    >
      <span
        aria-hidden
        className={classNames("text-xl font-bold max-sm:hidden", isHere ? "text-petrol" : "text-quiet")}
      >
        {number}
      </span>
      <span className="min-w-0 self-start sm:self-center">
        <span
          className={classNames(
            "inline-block border-b-3 leading-6 font-bold",
            isHere ? "border-petrol" : "border-transparent group-hover:border-hairline",
          )}
        >
          {title}
        </span>
        <TicketWords line={line} />
      </span>
    </Link>
  );
}
