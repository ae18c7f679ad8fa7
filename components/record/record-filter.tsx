"use client";

import { useId, useState } from "react";
import { isTileName } from "@/components/record/use-record-filter";
import { Button } from "@/components/ui/button";
import type { RecordFilter } from "@/lib/board/queries";

interface RecordFilterBarProps {
  readonly filter: RecordFilter;
  readonly people: readonly { readonly id: string; readonly name: string }[];
  readonly onChange: (name: keyof RecordFilter, value: string | null) => void;
}

const FIELD = "min-h-10 border border-line bg-paper px-3 py-1.5 pointer-coarse:min-h-11";

/** Whose steps are shown, and of which tile. */
export function RecordFilterBar({ filter, people, onChange }: RecordFilterBarProps) {
  const id = useId();
  const [tile, setTile] = useState(filter.tile ?? "");
  const typed = tile.trim().toUpperCase();
  const isWrong = typed !== "" && !isTileName(typed);
  return (
    <form
      aria-label="Which steps"
      className="mt-4 flex flex-wrap items-end gap-x-5 gap-y-3"
      onSubmit={(event) => {
        event.preventDefault();
        if (!isWrong) onChange("tile", typed);
      }}
    >
      <label>
        <span className="block text-sm font-semibold">Person</span>
        <select
          value={filter.person ?? ""}
          onChange={(event) => onChange("person", event.target.value)}
          className={`${FIELD} max-w-60`}
        >
          <option value="">Everybody</option>
          {people.map((person) => (
            <option key={person.id} value={person.id}>
              {person.name}
            </option>
          ))}
        </select>
      </label>
      <div>
        <label htmlFor={`${id}-tile`} className="block text-sm font-semibold">
          Tile
        </label>
        <span className="flex gap-2">
          <input
            id={`${id}-tile`}
            value={tile}
            onChange={(event) => setTile(event.target.value)}
            placeholder="A1"
            autoComplete="off"
            aria-invalid={isWrong || undefined}
            aria-describedby={isWrong ? `${id}-wrong` : undefined}
            className={`${FIELD} figures w-24 placeholder:text-quiet`}
          />
          <Button type="submit">Show</Button>
        </span>
      </div>
      {(filter.person !== null || filter.tile !== null) && (
        <Button
          tone="bare"
          onClick={() => {
            setTile("");
            onChange("person", null);
            onChange("tile", null);
          }}
        >
          Show all steps
        </Button>
      )}
      {isWrong && (
        <p id={`${id}-wrong`} className="w-full text-sm font-semibold text-madder">
          A tile is named by its row&apos;s letter and its column&apos;s number, as A1 or B12.
        </p>
      )}
    </form>
  );
}
