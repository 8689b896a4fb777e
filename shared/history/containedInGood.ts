import type { CommitGraph } from "./commitGraph.ts";

/**
 * The suspects that are one of the given good commits or an ancestor of one, in the order given: a good build holds
 * them, so that each is either innocent or mended there. Commits that are not known are passed over. Cost O(n).
 */
export function containedInGood(
  graph: CommitGraph,
  suspects: Iterable<string>,
  goodElsewhere: Iterable<string>,
): Set<string> {
  const places = [...goodElsewhere].filter((sha) => graph.has(sha)).map((sha) => graph.placeOf(sha));
  const marks = graph.ancestorMarks(places);
  return new Set([...suspects].filter((sha) => graph.has(sha) && marks[graph.placeOf(sha)]));
}
