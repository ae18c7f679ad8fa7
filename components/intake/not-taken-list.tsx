import { countOf } from "@/lib/board/words";
import type { NotTaken } from "@/lib/uploads/chosen-files";

interface NotTakenListProps {
  readonly notTaken: readonly NotTaken[];
  readonly alreadyIn: number;
}

/** What was chosen and not sent, and why: nothing is left out silently. */
export function NotTakenList({ notTaken, alreadyIn }: NotTakenListProps) {
  if (notTaken.length === 0 && alreadyIn === 0) return null;
  return (
    <section aria-label="Not sent" className="text-sm">
      {alreadyIn > 0 && (
        <p>{countOf(alreadyIn, "file")} in already, the same name, folder, size and time: not sent again.</p>
      )}
      {notTaken.length > 0 && (
        <details>
          <summary className="min-h-6 py-1 font-semibold">{countOf(notTaken.length, "other file")} not taken</summary>
          <ul className="figures mt-1 max-h-60 overflow-y-auto border border-hairline px-3 py-2">
            {notTaken.map((file, at) => (
              <li key={at} className="break-all">
                {file.folder === "" ? file.name : `${file.folder}/${file.name}`}
                <span className="text-quiet"> {file.reason}</span>
              </li>
            ))}
          </ul>
        </details>
      )}
    </section>
  );
}
