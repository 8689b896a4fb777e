import type { CommitGraph } from "./commitGraph.ts";
import { containedInGood } from "./containedInGood.ts";
import { suspectWeights } from "./suspectWeights.ts";
import type { NextTest, NextTestOptions } from "./types.ts";

/**
 * The suspect whose build would tell most: among those that were not built yet, the one with the largest
 * min(n(c), |S| - n(c)), n(c) = suspects that are c or its ancestors. If c is bad the n(c) remain, if good the others.
 *
 * A bad answer can bring back commits that only a good commit on another line of a merge had cleared (it is no ancestor
 * of the new onset): `remainingAfter` counts, as the publications do, without them, and their merge base is asked next.
 *
 * Before that rule comes another: where a good commit on another line contains suspects, the newest of those (the
 * merge base of the good line and the broken one) goes first. If it is bad too, the good line holds a fix and must not
 * be listened to; if it is good, it clears with right what the good line made unlikely.
 *
 * Equally good suspects: the newer in topological order, because its sources and build recipe are nearest to what the
 * machines build today, so that the build is most likely to succeed.
 *
 * Null when one suspect is left, and when none is left that was not built. Suspects that are not in the graph are
 * passed over. Cost: see `suspectWeights`.
 * Source: C. Couder, Fighting regressions with git bisect, LinuxCon 2009 (rule and merge bases). On a line it takes at
 * most ceil(log2 n) builds, with two parents a commit at most 1.71 times the best plan: J. Courtiel, P. Dorbec,
 * R. Lecoq, Algorithmica 86(5):1365-1399, 2024.
 */
export function nextTest(graph: CommitGraph, suspects: Iterable<string>, options: NextTestOptions): NextTest | null {
  const places = [...new Set(suspects)]
    .filter((sha) => graph.has(sha))
    .map((sha) => graph.placeOf(sha))
    .sort((a, b) => a - b);
  if (places.length < 2) return null;
  const weights = suspectWeights(graph, places);
  const canBuild = (rank: number) => !options.tested.has(graph.shaAt(places[rank]!));
  const halved = (weight: number) => Math.min(weight, places.length - weight);
  const best = (ranks: readonly number[]) => largest(ranks.filter(canBuild), (rank) => halved(weights[rank]!));

  const bases = mergeBases(graph, places, options.goodElsewhere);
  const base = best(bases);
  const chosen = base ?? best([...places.keys()]);
  if (chosen === null) return null;
  return {
    commit: graph.shaAt(places[chosen]!),
    remainingAfter: places.length - halved(weights[chosen]!),
    why: base === null ? "halves" : "merge-base",
  };
}

/** Ranks of the suspects that a good commit elsewhere contains while it contains no child of theirs. */
function mergeBases(graph: CommitGraph, places: readonly number[], elsewhere: Iterable<string>): number[] {
  const shas = places.map((place) => graph.shaAt(place));
  const afterOnset = graph.descendantMarks(places[places.length - 1]!);
  const speaking = [...elsewhere].filter((sha) => graph.has(sha) && !afterOnset[graph.placeOf(sha)]);
  if (speaking.length === 0) return [];
  const contained = containedInGood(graph, shas, speaking);
  const surpassed = new Set<number>();
  for (const sha of contained) for (const parent of graph.parentsAt(graph.placeOf(sha))) surpassed.add(parent);
  return [...places.keys()].filter((rank) => contained.has(shas[rank]!) && !surpassed.has(places[rank]!));
}

/** The item with the largest value, the last of equal ones; null of none. */
function largest(ranks: readonly number[], valueOf: (rank: number) => number): number | null {
  let best: number | null = null;
  for (const rank of ranks) if (best === null || valueOf(rank) >= valueOf(best)) best = rank;
  return best;
}
