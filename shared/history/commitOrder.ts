import type { CommitGraph } from "./commitGraph.ts";

/**
 * The order of columns on the strip and of rows in a history: every parent before its children, the line of first
 * parents before what was merged into it, so that the commits of a merged branch stand together, right before their
 * merge. Only commits reachable from `tips` are listed; the line of the first tip comes first, then what each further
 * tip adds. Tips that are not known are passed over. A later commit on a tip never reorders earlier ones.
 * Cost O(n), no recursion.
 */
export function commitOrder(graph: CommitGraph, tips: Iterable<string>): string[] {
  const entered = new Uint8Array(graph.size);
  const nextParent = new Int32Array(graph.size);
  const order: string[] = [];
  for (const tip of tips) {
    if (!graph.has(tip)) continue;
    const start = graph.placeOf(tip);
    if (entered[start]) continue;
    entered[start] = 1;
    const path = [start];
    while (path.length > 0) {
      const place = path[path.length - 1]!;
      const parent = graph.parentsAt(place)[nextParent[place]!++];
      if (parent === undefined) {
        order.push(graph.shaAt(place));
        path.pop();
      } else if (!entered[parent]) {
        entered[parent] = 1;
        path.push(parent);
      }
    }
  }
  return order;
}
