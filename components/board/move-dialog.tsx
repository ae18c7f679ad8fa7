"use client";

import { useId, useState } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { useHand, useInHand, type Asked } from "@/components/board/hand";
import { usePutDown } from "@/components/board/use-put-down";
import { Button } from "@/components/ui/button";
import { Dialog, DialogAnswers } from "@/components/ui/dialog";
import { Field } from "@/components/ui/field";
import type { BoardIndex } from "@/lib/board/board-index";
import { moveToWords, parseMoveTo } from "@/lib/board/move-to";
import {
  framesMoved,
  nameOfStack,
  stackOfTarget,
  tileAt,
  type Moving,
  type Occupied,
  type Target,
} from "@/lib/board/moving";
import { growthToConfirm, nameOfMoved, outcomeOf } from "@/lib/board/outcome";

/** "Move to…": the way by name for everything that can be dragged. Stands once on the board, opened from many places. */
export function MoveDialog({ index }: { readonly index: BoardIndex }) {
  const asked = useInHand((state) => state.asked);
  const hand = useHand();
  if (!asked) return null;
  return <MoveForm key={asked.text} index={index} asked={asked} onClose={() => hand.ask(null)} />;
}

interface MoveFormProps {
  readonly index: BoardIndex;
  readonly asked: Asked;
  readonly onClose: () => void;
}

const OCCUPIED: readonly { readonly value: Occupied; readonly label: string }[] = [
  { value: "swap", label: "Swap places" },
  { value: "push", label: "Shift the rest of the row to the right" },
  { value: "take", label: "Another take" },
];

function MoveForm({ index, asked, onClose }: MoveFormProps) {
  const { moving, verb } = asked;
  const [text, setText] = useState(asked.text);
  const [occupied, setOccupied] = useState<Occupied>("swap");
  // The place beyond the grid that was asked for, until another one is written.
  const [askedFor, setAskedFor] = useState<string | null>(null);
  const give = useGive(index, asked);
  const parsed = verb === "merge" ? parseMerge(index, moving, text) : parseMoveTo(index, moving, text);
  const said = "target" in parsed ? parsed.target : null;
  const isTaken = moving.kind === "stack" && said?.kind === "place" && tileAt(index, said) !== null;
  const isOwn = said !== null && outcomeOf(index, moving, said).state === "impossible";
  const target = said?.kind === "place" && isTaken ? { ...said, occupied } : said;
  const outcome = target && outcomeOf(index, moving, target);
  const growth = target && growthToConfirm(index, target);
  const isAsking = growth !== null && askedFor === text;
  const isPossible = outcome?.state === "possible";
  const move = () => {
    if (target && isPossible && give(target)) onClose();
  };
  const problem = "problem" in parsed ? parsed.problem : null;
  const name = verb === "merge" ? mergeName(index, moving) : nameOfMoved(index, moving);
  return (
    <Dialog
      isOpen
      onOpenChange={(isOpen) => !isOpen && onClose()}
      title={verb === "merge" ? `Merge ${name} with…` : `Move ${name} to…`}
      description={<MovedNames index={index} moving={moving} />}
    >
      <form
        onSubmit={(event) => {
          event.preventDefault();
          if (growth === null) move();
          else setAskedFor(text);
        }}
      >
        <Field
          name="place"
          label={verb === "merge" ? "Tile that takes its frames" : "Tile or place"}
          hint="A tile's name as A4, also of a place that is free."
          value={text}
          onChange={(event) => setText(event.target.value)}
          autoFocus
          autoComplete="off"
          autoCapitalize="characters"
          spellCheck={false}
          onFocus={(event) => event.target.select()}
          error={problem ?? undefined}
        />
        {verb === "move" && (
          <div className="mt-2 flex flex-wrap gap-2">
            {moveToWords(index, moving).map((word) => (
              <Button key={word} size="slim" onClick={() => setText(word)}>
                {word}
              </Button>
            ))}
          </div>
        )}
        {isTaken && !isOwn && <OccupiedChoice value={occupied} onChange={setOccupied} />}
        <p role="status" className="mt-4 min-h-12 max-w-[60ch]">
          {outcome?.sentence}
        </p>
        {isAsking && (
          <p role="alert" className="mt-2 max-w-[60ch] border border-ochre bg-ochre-wash px-3 py-2 text-ochre-on">
            {growth} Is {text.trim().toUpperCase()} the place you mean?
          </p>
        )}
        <DialogAnswers>
          {isAsking && isPossible ? (
            <Button onClick={move}>Grow the grid and move</Button>
          ) : (
            <Button type="submit" tone="petrol" disabled={!isPossible}>
              {verb === "merge" ? "Merge" : "Move"}
            </Button>
          )}
          <Button onClick={onClose}>Cancel</Button>
        </DialogAnswers>
      </form>
    </Dialog>
  );
}

function useGive(index: BoardIndex, { moving, verb }: Asked): (target: Target) => boolean {
  const { run } = useBoardCommands();
  const putDown = usePutDown(index);
  return (target) => {
    const stackId = framesMoved(index, moving)[0]?.stackId;
    const intoStackId = stackOfTarget(index, target);
    if (verb === "move") return putDown(moving, target);
    return stackId && intoStackId ? run({ type: "merge-stacks", intoStackId, stackIds: [stackId] }) : false;
  };
}

/** A merge goes into a stack that is there. */
function parseMerge(index: BoardIndex, moving: Moving, text: string): ReturnType<typeof parseMoveTo> {
  const parsed = parseMoveTo(index, moving, text);
  if (!("target" in parsed) || stackOfTarget(index, parsed.target)) return parsed;
  return { problem: "There is no stack to merge with. Write a tile that has frames." };
}

function mergeName(index: BoardIndex, moving: Moving): string {
  const stackId = framesMoved(index, moving)[0]?.stackId ?? "";
  return nameOfStack(index, stackId);
}

const NAMES_MOST = 12;

function MovedNames({ index, moving }: { readonly index: BoardIndex; readonly moving: Moving }) {
  const frames = framesMoved(index, moving);
  const rest = frames.length - NAMES_MOST;
  return (
    <p className="figures text-sm text-quiet">
      {frames
        .slice(0, NAMES_MOST)
        .map(({ name }) => name)
        .join(" ")}
      {rest > 0 && ` and ${rest} more`}
    </p>
  );
}

interface OccupiedChoiceProps {
  readonly value: Occupied;
  readonly onChange: (value: Occupied) => void;
}

function OccupiedChoice({ value, onChange }: OccupiedChoiceProps) {
  const name = useId();
  return (
    <fieldset className="mt-4">
      <legend className="font-semibold">There is a stack already</legend>
      {OCCUPIED.map((choice) => (
        <label key={choice.value} className="flex min-h-8 items-center gap-2 pointer-coarse:min-h-11">
          <input
            type="radio"
            name={name}
            checked={value === choice.value}
            onChange={() => onChange(choice.value)}
            className="size-4 accent-petrol"
          />
          {choice.label}
        </label>
      ))}
    </fieldset>
  );
}
