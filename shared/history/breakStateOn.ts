import type { CommitGraph } from "./commitGraph.ts";
import type { BreakStateOnLine, TracedBreak, Tests } from "./types.ts";

/**
 * What a break is at the tip of a line (a default branch, or the branch it was found on): `absent` where the line does
 * not contain the onset, `open` where one of the tip's nearest tested commits, itself included, is a bad one of this
 * break, else `repaired`. A later break of the same entries does not reopen this one; an untested merge of a repaired
 * line with a broken one is open until it is tested. Cost O(n) at worst.
 * @throws RangeError when the tip or the onset is not in the graph.
 */
export function breakStateOn(
  graph: CommitGraph,
  traced: Pick<TracedBreak, "onset" | "bad">,
  tests: Tests,
  tip: string,
): BreakStateOnLine {
  if (!graph.isAncestor(traced.onset, tip)) return "absent";
  const members = new Set(traced.bad);
  const seen = new Set<number>();
  const path = [graph.placeOf(tip)];
  for (let place = path.pop(); place !== undefined; place = path.pop()) {
    if (seen.has(place)) continue;
    seen.add(place);
    const sha = graph.shaAt(place);
    if (members.has(sha)) return "open";
    if (!tests.has(sha)) path.push(...graph.parentsAt(place));
  }
  return "repaired";
}
