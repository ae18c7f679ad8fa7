"use client";

import { useBoardCommands } from "@/components/board/board-commands";
import { SetAsideItems } from "@/components/board/set-aside-items";
import { useHand, useInHand } from "@/components/board/hand";
import { usePutDown } from "@/components/board/use-put-down";
import { Button } from "@/components/ui/button";
import { Menu } from "@/components/ui/menu";
import type { BoardIndex } from "@/lib/board/board-index";
import { nameOfTarget } from "@/lib/board/moving";
import { nameOfMoved, outcomeOf } from "@/lib/board/outcome";
import { countOf } from "@/lib/board/words";

/** What can be done with the frames that are selected; or, while something is picked up by a tap, where it may go. */
export function SelectionBar({ index }: { readonly index: BoardIndex }) {
  const selected = useInHand((state) => state.selected);
  const carried = useInHand((state) => state.carried);
  if (carried?.by === "taps") return <TapBar index={index} />;
  return selected.size > 0 ? <Selected index={index} selected={selected} /> : null;
}

const BAR =
  "sticky bottom-0 z-30 flex flex-wrap items-center gap-x-4 gap-y-2 border-t border-l-6 border-t-ink border-l-petrol bg-paper px-4 py-2";

interface SelectedProps {
  readonly index: BoardIndex;
  readonly selected: ReadonlySet<string>;
}

function Selected({ index, selected }: SelectedProps) {
  const hand = useHand();
  const { run } = useBoardCommands();
  const frames = index.board.frames.filter(({ id }) => selected.has(id));
  const frameIds = frames.map(({ id }) => id);
  const places = new Set(frames.map(({ stackId }) => (stackId && index.tileOfStack.get(stackId)?.name) ?? "loose"));
  const inUse = frames.filter(({ setAside }) => setAside === null);
  const moving = { kind: "frames", frameIds } as const;
  return (
    <div role="region" aria-label="Selected frames" className={BAR}>
      <p role="status">
        <span className="font-bold">{countOf(frames.length, "frame")} selected</span>
        {places.size > 1 && <span className="text-quiet"> in {countOf(places.size, "place")}</span>}
      </p>
      <div className="flex flex-wrap gap-2">
        <Button size="slim" onClick={() => hand.ask({ moving, text: "", verb: "move" })}>
          Move to…
        </Button>
        <Button size="slim" onClick={() => hand.pickUp(moving, "taps")}>
          Pick up
        </Button>
        {inUse.length > 0 && (
          <Menu trigger="Set aside…" tone="plain" align="start">
            <SetAsideItems frameIds={inUse.map(({ id }) => id)} />
          </Menu>
        )}
        {inUse.length < frames.length && (
          <Button
            size="slim"
            onClick={() =>
              run({ type: "bring-back", frameIds: frames.filter((each) => each.setAside !== null).map(({ id }) => id) })
            }
          >
            Bring back
          </Button>
        )}
        <Button size="slim" tone="bare" onClick={() => hand.select([])}>
          Clear
        </Button>
      </div>
    </div>
  );
}

function TapBar({ index }: { readonly index: BoardIndex }) {
  const hand = useHand();
  const putDown = usePutDown(index);
  const carried = useInHand((state) => state.carried);
  if (!carried) return null;
  const { moving, target } = carried;
  const outcome = target && outcomeOf(index, moving, target);
  return (
    <div role="region" aria-label="Picked up" className={BAR}>
      <p role="status" className="max-w-[70ch] min-w-0 flex-1">
        <span className="font-bold">{nameOfMoved(index, moving)} picked up. </span>
        {outcome ? outcome.sentence : "Tap the tile or place where it goes: a first tap shows what would happen."}
      </p>
      <div className="flex flex-wrap gap-2">
        {target && outcome?.state !== "impossible" && (
          <Button
            size="slim"
            tone="petrol"
            onClick={() => {
              hand.letGo();
              putDown(moving, target);
            }}
          >
            Move to {nameOfTarget(index, target)}
          </Button>
        )}
        <Button size="slim" onClick={() => hand.letGo()}>
          Put back
        </Button>
      </div>
    </div>
  );
}
