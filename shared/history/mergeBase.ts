import type { CommitGraph } from "./commitGraph.ts";

const OF_A = 1;
const OF_B = 2;
const BOTH = OF_A | OF_B;
/** Below a common ancestor that was found already. */
const SURPASSED = 4;

/**
 * The best common ancestors of two commits: those that are no ancestor of another common one. One in plain forks,
 * several after criss-cross merges, none for unrelated histories; newest first. Where one commit is an ancestor of the
 * other, that one. Cost O(n) at worst; one sweep over falling topological places.
 * @throws RangeError for a commit that is not in the graph.
 */
export function mergeBase(graph: CommitGraph, a: string, b: string): string[] {
  const marks = new Uint8Array(graph.size);
  const placeA = graph.placeOf(a);
  const placeB = graph.placeOf(b);
  marks[placeA]! |= OF_A;
  marks[placeB]! |= OF_B;
  // Commits that are marked, not surpassed and still to be visited: the sweep is over when none is left.
  let open = placeA === placeB ? 1 : 2;
  const bases: string[] = [];
  for (let place = Math.max(placeA, placeB); place >= 0 && open > 0; place--) {
    let mark = marks[place]!;
    if (mark === 0) continue;
    if (!(mark & SURPASSED)) {
      open -= 1;
      if (mark === BOTH) {
        bases.push(graph.shaAt(place));
        mark |= SURPASSED;
      }
    }
    for (const parent of graph.parentsAt(place)) {
      const before = marks[parent]!;
      const after = before | mark;
      if (before === 0 && !(after & SURPASSED)) open += 1;
      if (before !== 0 && !(before & SURPASSED) && after & SURPASSED) open -= 1;
      marks[parent] = after;
    }
  }
  return bases;
}
