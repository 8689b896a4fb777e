import type { CommitGraph } from "./commitGraph.ts";

/**
 * n(c) of every suspect: how many suspects are that commit or its ancestors, whatever the lines between them.
 * `places` are topological places, ascending; the answer is in the same order. Counted exactly, for 32 suspects at a
 * time in one sweep: cost O(n * edges / 32) steps and O(n) memory, where a set per suspect would take O(n^2).
 * Assumes, as is true of suspects, that a way from one to another leads through suspects only.
 */
export function suspectWeights(graph: CommitGraph, places: readonly number[]): Int32Array {
  const size = places.length;
  const rankOf = new Map(places.map((place, rank) => [place, rank]));
  const start = new Int32Array(size + 1);
  const parents: number[] = [];
  places.forEach((place, rank) => {
    for (const parent of graph.parentsAt(place)) {
      const parentRank = rankOf.get(parent);
      if (parentRank !== undefined) parents.push(parentRank);
    }
    start[rank + 1] = parents.length;
  });
  const parentRanks = Int32Array.from(parents);
  const weights = new Int32Array(size);
  const held = new Int32Array(size);
  for (let base = 0; base < size; base += 32) {
    held.fill(0);
    for (let rank = base; rank < size; rank++) {
      let bits = rank < base + 32 ? 1 << (rank - base) : 0;
      for (let edge = start[rank]!; edge < start[rank + 1]!; edge++) bits |= held[parentRanks[edge]!]!;
      held[rank] = bits;
      weights[rank]! += countBits(bits);
    }
  }
  return weights;
}

/** Number of set bits of a 32-bit integer. Source: H. S. Warren, Hacker's Delight, 2nd ed. 2012, section 5-1. */
function countBits(bits: number): number {
  let x = bits - ((bits >>> 1) & 0x55555555);
  x = (x & 0x33333333) + ((x >>> 2) & 0x33333333);
  return Math.imul((x + (x >>> 4)) & 0x0f0f0f0f, 0x01010101) >>> 24;
}
