import type { CommitGraph } from "./commitGraph.ts";
import type { Tests } from "./types.ts";

const REACHED = 1;
const CLEARED = 2;

/**
 * Topological places, ascending, of the onset and its ancestors less the ancestors-or-self of every good tested
 * ancestor of the onset. It is enough to clear from the nearest tested ones: every other good ancestor lies below one
 * of them. One sweep over falling places from the onset, ended where nothing is left to reach.
 */
export function suspectsOf(graph: CommitGraph, tests: Tests, onset: number): number[] {
  const marks = new Uint8Array(onset + 1);
  marks[onset] = REACHED;
  // Places that are reached, not cleared and not visited yet.
  let open = 1;
  const suspects: number[] = [];
  for (let place = onset; place >= 0 && open > 0; place--) {
    let mark = marks[place]!;
    if (mark === 0) continue;
    if (mark === REACHED) {
      open -= 1;
      if (place !== onset && tests.get(graph.shaAt(place)) === "good") mark = CLEARED;
      else suspects.push(place);
    }
    for (const parent of graph.parentsAt(place)) {
      const before = marks[parent]!;
      const after = before | (mark & CLEARED ? CLEARED : REACHED);
      if (before === 0 && after === REACHED) open += 1;
      if (before === REACHED && after !== REACHED) open -= 1;
      marks[parent] = after;
    }
  }
  return suspects.reverse();
}
