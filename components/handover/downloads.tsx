import { buttonClass } from "@/components/ui/button";
import { manifestUrl } from "@/lib/board/queries";

const FORMS = [
  {
    form: "json",
    title: "Manifest (JSON)",
    tone: "petrol",
    text: "Everything, for programs: grid, stacks with row, column and take, every frame with what was measured and why it is where it is, seams, holes, open questions, and what could not be read.",
  },
  {
    form: "csv",
    title: "Table (CSV)",
    tone: "plain",
    text: "One row a file, for a spreadsheet or a script: name and folder, tile, take, in use or set aside and why, sharpness, SHA-256.",
  },
] as const;

/** The files that describe the sorted sets; the pictures themselves stay where they are. */
export function Downloads({ projectId }: { readonly projectId: string }) {
  return (
    <section aria-label="Downloads">
      <h2 className="text-lg font-bold">Downloads</h2>
      <ul className="mt-2 grid gap-4 sm:grid-cols-2">
        {FORMS.map(({ form, title, tone, text }) => (
          <li key={form} className="flex flex-col items-start gap-3 border border-hairline p-4">
            <p className="text-sm">{text}</p>
            <a href={manifestUrl(projectId, form)} download className={`${buttonClass({ tone })} mt-auto`}>
              {title}
            </a>
          </li>
        ))}
      </ul>
      <p className="mt-3 text-sm text-quiet">
        The form of the JSON is described in its{" "}
        <a href="/manifest.schema.json" className="link">
          schema
        </a>
        .
      </p>
    </section>
  );
}
