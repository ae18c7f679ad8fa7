import { Field } from "@/components/ui/field";
import { trimmed } from "@/lib/board/words";
import type { FormState } from "@/lib/http/form-state";

interface ProjectFieldsProps {
  readonly state: FormState;
  readonly initial: {
    readonly name: string;
    /** Fraction of the tile's side. */
    readonly overlapWanted: number;
    readonly framesPerTile: { readonly least: number; readonly most: number };
  };
}

/** What a lead says about a project: for the new one and for its settings. */
export function ProjectFields({ state, initial }: ProjectFieldsProps) {
  const { values, fields } = state;
  return (
    <>
      <Field
        name="name"
        label="Name"
        hint="Of the picture: the place and the light, say."
        required
        autoComplete="off"
        defaultValue={values.name ?? initial.name}
        error={fields.name}
      />
      <Field
        name="overlapWanted"
        label="Overlap wanted"
        hint="Of the tile's side. A seam with less is shown as a small overlap."
        unit="%"
        inputMode="decimal"
        required
        autoComplete="off"
        defaultValue={values.overlapWanted ?? trimmed(initial.overlapWanted * 100)}
        error={fields.overlapWanted}
      />
      <fieldset>
        <legend className="font-semibold">Frames per tile</legend>
        <p className="text-sm text-quiet">A tile with fewer in use than the least is shown as having few.</p>
        <div className="mt-1 flex flex-wrap gap-x-8 gap-y-4">
          <Field
            name="least"
            label="least"
            unit="frames"
            inputMode="numeric"
            required
            autoComplete="off"
            defaultValue={values.least ?? initial.framesPerTile.least}
            error={fields.least}
          />
          <Field
            name="most"
            label="most"
            unit="frames"
            inputMode="numeric"
            required
            autoComplete="off"
            defaultValue={values.most ?? initial.framesPerTile.most}
            error={fields.most}
          />
        </div>
      </fieldset>
    </>
  );
}
