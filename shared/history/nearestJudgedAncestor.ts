import type { CommitGraph } from "./commitGraph.ts";

/**
 * The commit that a build is compared with: the nearest ancestor (not the commit itself) for which `judged` is true,
 * by number of steps, between equally near ones the one on the earlier parent. Null where there is none or the commit
 * is not known. Depends on the graph alone, not on the order in which builds came. Cost O(n) at worst.
 */
export function nearestJudgedAncestor(
  graph: CommitGraph,
  sha: string,
  judged: (sha: string) => boolean,
): string | null {
  if (!graph.has(sha)) return null;
  const start = graph.placeOf(sha);
  const seen = new Set([start]);
  const queue = [start];
  for (let head = 0; head < queue.length; head++) {
    const place = queue[head]!;
    if (place !== start && judged(graph.shaAt(place))) return graph.shaAt(place);
    for (const parent of graph.parentsAt(place)) {
      if (seen.has(parent)) continue;
      seen.add(parent);
      queue.push(parent);
    }
  }
  return null;
}
