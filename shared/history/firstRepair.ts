import type { CommitGraph } from "./commitGraph.ts";
import type { FollowedBreak } from "./traceEntries.ts";

/**
 * First good commit, in topological order, that follows a bad commit of the break and has no bad commit of it among
 * its descendants: a line merged in later may bring the break back to where it had been repaired, and then it was not
 * over. With `within` (marks by place) both are looked for in that part of the graph only.
 */
export function firstRepair(graph: CommitGraph, followed: FollowedBreak, within: Uint8Array | null): string | null {
  const candidates = within ? followed.goodAfter.filter((place) => within[place]) : followed.goodAfter;
  const first = candidates[0];
  if (first === undefined) return null;
  const later = followed.bad.filter((place) => place > first && (!within || within[place]));
  if (later.length === 0) return graph.shaAt(first);
  const seenAgain = graph.ancestorMarks(later, first);
  const repair = candidates.find((place) => !seenAgain[place]);
  return repair === undefined ? null : graph.shaAt(repair);
}
