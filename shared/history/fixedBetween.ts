import type { CommitGraph } from "./commitGraph.ts";
import type { FollowedBreak } from "./traceEntries.ts";
import type { FixedBetween } from "./types.ts";

/**
 * Finds a line that was good again while the break went on along another: a good commit that follows bad ones but does
 * not contain all of those that are no later than it or come on other lines. Answers with the newest bad commit that
 * the first such good commit contains: the fix lies between the two. Null where every good commit after the break
 * contains all of its bad ones (a plain repair).
 */
export function fixedBetween(graph: CommitGraph, followed: FollowedBreak): FixedBetween | null {
  for (const good of followed.goodAfter) {
    const contained = graph.ancestorMarks([good], followed.onset);
    if (followed.bad.every((place) => contained[place])) continue;
    const bad = followed.bad.findLast((place) => contained[place])!;
    return { bad: graph.shaAt(bad), good: graph.shaAt(good) };
  }
  return null;
}
