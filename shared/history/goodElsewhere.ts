import type { CommitGraph } from "./commitGraph.ts";
import type { Tests } from "./types.ts";

/**
 * Good commits that say something of an onset's suspects without clearing them, in topological order: those that are
 * neither ancestors of the onset (these clear) nor its descendants (these repair). Cost O(n).
 * @throws RangeError when the onset is not in the graph.
 */
export function goodElsewhere(graph: CommitGraph, onset: string, tests: Tests): string[] {
  const from = graph.placeOf(onset);
  const before = graph.ancestorMarks([from]);
  const after = graph.descendantMarks(from);
  const found: number[] = [];
  for (const [sha, test] of tests) {
    if (test !== "good" || !graph.has(sha)) continue;
    const place = graph.placeOf(sha);
    if (!before[place] && !after[place]) found.push(place);
  }
  return found.sort((a, b) => a - b).map((place) => graph.shaAt(place));
}
