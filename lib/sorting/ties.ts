import type { GridGraph } from "./collect-edges";
import { clashWeight, trustIn, type Label } from "./lattice";
import { inSteps, misfitScale } from "./lattice-steps";
import { LARGEST_SAME_PLACE } from "./vector";

/** What holds a part of the grid to the rest of it. */
export interface Tie {
  /** Stack indices of the smaller side. */
  readonly members: readonly number[];
  /** Weight of the edges across that agree with where it lies. */
  readonly agreeing: number;
  /** Weight of those that agree on the likeliest other place. */
  readonly against: number;
  /** How far that place lies from where it is now; null where no edge speaks for another. */
  readonly rival: { readonly columns: number; readonly rows: number } | null;
  /** Weight of the places that it shares with the rest without showing the same. */
  readonly clashing: number;
}

export interface Ties {
  /** Stacks that agreeing edges connect with each other, the most first. */
  readonly pieces: readonly ReadonlySet<number>[];
  readonly ties: readonly Tie[];
  /** Pairs of stacks that show the same. */
  readonly alike: readonly (readonly [number, number])[];
}

interface Link {
  readonly other: number;
  readonly weight: number;
  /** Where the edge wants the other one, less where it lies. */
  readonly columns: number;
  readonly rows: number;
  /** Both show the same. */
  readonly isSame: boolean;
}

interface Vote {
  readonly columns: number;
  readonly rows: number;
  readonly weight: number;
}

/**
 * How firmly each part of a placed grid is held: the strongest agreeing edges make a tree, and wherever the tree is cut,
 * all edges across the cut are weighed. A row whose tiles fit each other well may still hang on the rest by one weak
 * edge, which its tiles alone would not tell.
 * @param labels - of the stacks that the pictures placed
 * @param plain - stacks with too little texture to be told apart
 */
export function findTies(graph: GridGraph, labels: ReadonlyMap<number, Label>, plain: ReadonlySet<number>): Ties {
  const links = linksOf(graph, labels);
  const { pieces, tree } = spanTree(links);
  const sharing = new Map<string, number[]>();
  for (const [index, { column, row }] of labels) {
    sharing.set(`${column} ${row}`, [...(sharing.get(`${column} ${row}`) ?? []), index]);
  }
  const clash = (index: number, inside: ReadonlySet<number>): number => {
    const { column, row } = labels.get(index) ?? {};
    const rivals = (sharing.get(`${column} ${row}`) ?? []).filter((other) => !inside.has(other));
    const isSame = (other: number) => links.get(index)?.some((link) => link.other === other && link.isSame);
    return rivals.reduce((sum, other) => sum + (isSame(other) ? 0 : clashWeight(index, other, plain)), 0);
  };
  const ties = pieces.flatMap((piece) => tiesOf(piece, tree, links, clash));
  const alike = [...links].flatMap(([index, own]) =>
    own.flatMap(({ other, isSame }) => (isSame && index < other ? [[index, other] as const] : [])),
  );
  return { pieces: pieces.map((piece) => new Set(piece)), ties, alike };
}

function linksOf({ edges, steps }: GridGraph, labels: ReadonlyMap<number, Label>): Map<number, Link[]> {
  const scale = misfitScale(edges, steps);
  const links = new Map<number, Link[]>([...labels.keys()].map((index) => [index, []]));
  for (const edge of edges) {
    const [a, b] = [labels.get(edge.a), labels.get(edge.b)];
    if (!a || !b) continue;
    const isSame = Math.hypot(edge.x, edge.y) < LARGEST_SAME_PLACE;
    const found = edge.steps ?? (isSame ? { columns: 0, rows: 0 } : inSteps(edge, steps));
    const columns = a.column + found.columns - b.column;
    const rows = a.row + found.rows - b.row;
    const weight = edge.weight * (edge.steps || isSame ? 1 : trustIn(edge, inSteps(edge, steps), scale));
    links.get(edge.a)?.push({ other: edge.b, weight, columns, rows, isSame });
    links.get(edge.b)?.push({ other: edge.a, weight, columns: -columns, rows: -rows, isSame });
  }
  return links;
}

/** Maximum spanning tree of the agreeing edges, grown from each piece's first stack; members in the order reached. */
function spanTree(links: ReadonlyMap<number, readonly Link[]>): {
  readonly pieces: readonly (readonly number[])[];
  /** By stack index: the one it hangs on. */
  readonly tree: ReadonlyMap<number, number>;
} {
  const tree = new Map<number, number>();
  const pieces: number[][] = [];
  const seen = new Set<number>();
  for (const start of links.keys()) {
    if (seen.has(start)) continue;
    const best = new Map<number, { weight: number; from: number }>([[start, { weight: Infinity, from: start }]]);
    const members: number[] = [];
    while (best.size > 0) {
      const [index, { from }] = [...best].reduce((p, q) => (q[1].weight > p[1].weight ? q : p));
      best.delete(index);
      seen.add(index);
      members.push(index);
      if (index !== start) tree.set(index, from);
      for (const { other, weight, columns, rows } of links.get(index) ?? []) {
        if (seen.has(other) || columns !== 0 || rows !== 0 || weight <= (best.get(other)?.weight ?? 0)) continue;
        best.set(other, { weight, from: index });
      }
    }
    pieces.push(members);
  }
  return { pieces: pieces.sort((a, b) => b.length - a.length), tree };
}

function tiesOf(
  piece: readonly number[],
  tree: ReadonlyMap<number, number>,
  links: ReadonlyMap<number, readonly Link[]>,
  clash: (index: number, inside: ReadonlySet<number>) => number,
): Tie[] {
  const below = new Map(piece.map((index) => [index, [index]]));
  // Leaves were reached last, so that each one's branch is whole before it joins the one it hangs on.
  for (const index of [...piece].reverse()) below.get(tree.get(index) ?? -1)?.push(...(below.get(index) ?? []));
  return piece.slice(1).map((index): Tie => {
    const branch = new Set(below.get(index));
    const members = branch.size * 2 <= piece.length ? [...branch] : piece.filter((other) => !branch.has(other));
    const inside = new Set(members);
    const votes = new Map<string, Vote>();
    for (const member of members) {
      for (const { other, weight, columns, rows } of links.get(member) ?? []) {
        if (inside.has(other)) continue;
        const key = `${columns} ${rows}`;
        // Where an edge wants the other one further right, it wants this one further left. Adding 0 turns -0 into 0.
        const before = votes.get(key) ?? { columns: 0 - columns, rows: 0 - rows, weight: 0 };
        votes.set(key, { ...before, weight: before.weight + weight });
      }
    }
    const agreeing = votes.get("0 0")?.weight ?? 0;
    votes.delete("0 0");
    const rival = [...votes.values()].reduce<Vote | null>((p, q) => (p && p.weight >= q.weight ? p : q), null);
    const clashing = members.reduce((sum, member) => sum + clash(member, inside), 0);
    return { members, agreeing, against: rival?.weight ?? 0, rival, clashing };
  });
}
