import type { CommitGraph } from "./commitGraph.ts";
import { nearestJudgedAncestor } from "./nearestJudgedAncestor.ts";
import type { Tests } from "./types.ts";

/**
 * The good commit to compare an onset with: the first tested one on the way back along first parents or, where that
 * line has none, the nearest tested ancestor on any line. Null where no ancestor was tested. For an onset every
 * nearest tested ancestor is good, so that whatever is met first is.
 */
export function lastGoodBefore(graph: CommitGraph, tests: Tests, onset: number): string | null {
  for (let place = graph.parentsAt(onset)[0]; place !== undefined; place = graph.parentsAt(place)[0]) {
    if (tests.has(graph.shaAt(place))) return graph.shaAt(place);
  }
  return nearestJudgedAncestor(graph, graph.shaAt(onset), (sha) => tests.has(sha));
}
