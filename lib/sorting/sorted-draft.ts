import { stackToken, tileToken } from "@/lib/board/name-tokens";
import type { GridGraph } from "./collect-edges";
import type { Take, TakeDoubt } from "./choose-takes";
import type { StackDraft } from "./draft";
import type { Positions } from "./find-positions";
import type { Seam } from "./find-seams";
import type { SoftStack } from "./soft-stacks";
import type { Place } from "./number-places";
import type { Layout } from "./place-stacks";
import type { Doubled } from "./split-doubles";
import type { SplitResult } from "./split-stacks";
import type { SortFrame, SortOptions } from "./types";

/** Everything that was found out, before it is put into words. Lists of stacks are by stack index. */
export interface SortedDraft {
  /** All frames in the order taken. */
  readonly order: readonly SortFrame[];
  readonly stacks: readonly StackDraft[];
  /** Indices of the stacks of each camera in the order shot. */
  readonly bodies: readonly (readonly number[])[];
  readonly layout: Layout;
  readonly places: readonly Place[];
  readonly takes: readonly Take[];
  readonly takeDoubts: readonly TakeDoubt[];
  readonly positions: Positions["positions"];
  readonly seams: readonly Seam[];
  readonly softStacks: readonly SoftStack[];
  readonly graph: GridGraph;
  readonly split: SplitResult & { readonly doubled: readonly Doubled[] };
  /** Frames that are certainly none of the picture: black ones. */
  readonly black: ReadonlySet<string>;
  readonly options: SortOptions;
}

/** True for stacks that are in the proposal; strays are dissolved into loose frames. */
export function isKept({ layout }: SortedDraft, stack: StackDraft): boolean {
  return stack.fixed !== null || layout.spots[stack.index]?.isStray !== true;
}

/** Token of the tile at a stack's place; null where it has none. */
export function tileOf({ places, stacks }: SortedDraft, index: number): string | null {
  const [place, stack] = [places[index], stacks[index]];
  return stack && place?.row && place.column ? tileToken(stack.id) : null;
}

/** Token of what a person calls a stack: its tile, or the frame it begins with. */
export function nameOf({ stacks }: SortedDraft, index: number): string {
  return stackToken(stacks[index]?.id ?? "");
}

export function percent(share: number): string {
  return `${Math.round(share * 100)} %`;
}
