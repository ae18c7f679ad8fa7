import Link from "next/link";
import { Perforation } from "@/components/shell/perforation";
import { classNames } from "@/components/ui/class-names";
import { countOf } from "@/lib/board/words";

interface ProjectStubsProps {
  readonly project: {
    readonly id: string;
    readonly name: string;
    readonly frames: number;
    readonly tiles: number;
    readonly openQuestions: number;
    readonly isSorting: boolean;
  };
}

/** The lower edge of a project's ticket: each step with how far it is, and the way there. */
export function ProjectStubs({ project }: ProjectStubsProps) {
  const stubs = [
    { view: "intake", title: "Bring in", ...intakeFacts(project) },
    { view: "board", title: "Board", ...boardFacts(project) },
    { view: "handover", title: "Hand over", ...handoverFacts(project) },
  ];
  return (
    <ul aria-label={`Steps of ${project.name}`} className="grid grid-cols-3 border-t border-ink">
      {stubs.map(({ view, title, texts, isOchre }, index) => (
        <li key={view} className="relative min-w-0">
          {index > 0 && <Perforation />}
          <Link
            href={`/projects/${project.id}/${view}`}
            className="block h-full px-4 py-2 -outline-offset-4 hover:bg-tray max-sm:px-2"
          >
            <span className="block text-sm font-semibold">{title}</span>
            <span
              className={classNames(
                "figures flex flex-wrap gap-x-[1ch] text-sm",
                isOchre ? "font-semibold text-ochre" : "text-quiet",
              )}
            >
              {/* On a phone the line breaks between the counts before it breaks inside one. */}
              {texts.map((text) => (
                <span key={text}>{text}</span>
              ))}
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}

type Project = ProjectStubsProps["project"];

function intakeFacts({ frames }: Project) {
  return { texts: [frames === 0 ? "start here" : countOf(frames, "frame")], isOchre: false };
}

function boardFacts({ frames, tiles, openQuestions, isSorting }: Project) {
  if (frames === 0) return { texts: ["not yet"], isOchre: false };
  if (isSorting) return { texts: ["sorting"], isOchre: false };
  return { texts: [`${countOf(tiles, "tile")},`, countOf(openQuestions, "question")], isOchre: openQuestions > 0 };
}

function handoverFacts({ tiles, isSorting }: Project) {
  return { texts: [tiles === 0 || isSorting ? "not yet" : "ready"], isOchre: false };
}
