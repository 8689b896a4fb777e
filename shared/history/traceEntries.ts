import type { CommitGraph } from "./commitGraph.ts";
import { fixedBetween } from "./fixedBetween.ts";
import { lastGoodBefore } from "./lastGoodBefore.ts";
import { firstRepair } from "./firstRepair.ts";
import { suspectsOf } from "./suspectsOf.ts";
import type { TracedBreak, TraceOptions, Tests } from "./types.ts";

/** A break while it is being followed; all numbers are topological places, ascending. */
export interface FollowedBreak {
  readonly onset: number;
  readonly bad: number[];
  /** Good commits with a bad commit of the break among their nearest tested ancestors. */
  readonly goodAfter: number[];
}

/**
 * The breaks of one class of entries (entries with the same tests), by onset in topological order.
 *
 * A bad commit whose nearest tested ancestors are all good, or that has none, is an onset; one with a bad commit
 * among them carries that commit's break on, along descendants and through merges. A commit that merges two broken
 * lines belongs to both breaks. The suspects of an onset are the onset and its ancestors less the ancestors-or-self of
 * its good tested ancestors: a good commit elsewhere never clears. The answer depends on the set of commits and tests
 * alone, so that a late build moves an onset or shortens a list exactly as if it had come in time.
 *
 * Tests of commits that the graph does not know are not looked at. Cost O(n) plus, for each onset, the stretch of
 * topological order that its suspects and members span; no recursion.
 * @throws RangeError when `options.tip` is not in the graph.
 * Source: which commits stay suspect, and why good commits on other lines must not clear: C. Couder, Fighting
 * regressions with git bisect, LinuxCon 2009.
 */
export function traceEntries(graph: CommitGraph, tests: Tests, options: TraceOptions = {}): TracedBreak[] {
  const inTip = options.tip === undefined ? null : graph.ancestorMarks([graph.placeOf(options.tip)]);
  return followBreaks(graph, tests).map((followed) => {
    const suspects = suspectsOf(graph, tests, followed.onset);
    const lastGood = lastGoodBefore(graph, tests, followed.onset);
    const fixed = fixedBetween(graph, followed);
    return {
      onset: graph.shaAt(followed.onset),
      lastGood,
      suspects: suspects.map((place) => graph.shaAt(place)),
      kind: lastGood !== null ? "after-good" : fixed ? "fixed-between" : "since-first-check",
      fixedBetween: fixed,
      historyIncomplete: suspects.some((place) => graph.cutAt(place)),
      bad: followed.bad.map((place) => graph.shaAt(place)),
      repairedBy: firstRepair(graph, followed, inTip),
    };
  });
}

const NONE: readonly number[] = [];
const GOOD = 1;
const BAD = 2;

/** Carries the breaks of the nearest tested ancestors forward through the graph, from the oldest bad commit on. */
function followBreaks(graph: CommitGraph, tests: Tests): FollowedBreak[] {
  const { size, parentStart, parentPlaces } = graph;
  const codes = new Uint8Array(size);
  let first = size;
  for (const [sha, test] of tests) {
    const place = graph.findPlace(sha);
    if (place < 0) continue;
    codes[place] = test === "good" ? GOOD : BAD;
    if (test === "bad" && place < first) first = place;
  }
  const breaks: FollowedBreak[] = [];
  // What a commit hands to its children: the breaks of its nearest bad ancestors (or its own), as indices of `breaks`.
  const carried = new Array<readonly number[]>(size).fill(NONE);
  for (let place = first; place < size; place++) {
    let arriving = NONE;
    for (let edge = parentStart[place]!; edge < parentStart[place + 1]!; edge++) {
      arriving = union(arriving, carried[parentPlaces[edge]!]!);
    }
    if (codes[place] === GOOD) {
      for (const index of arriving) breaks[index]!.goodAfter.push(place);
      continue;
    }
    if (codes[place] === BAD) {
      if (arriving.length === 0) arriving = [breaks.push({ onset: place, bad: [], goodAfter: [] }) - 1];
      for (const index of arriving) breaks[index]!.bad.push(place);
    }
    carried[place] = arriving;
  }
  return breaks;
}

/** Union of two ascending lists; the same array where nothing is added, so that long lines share one. */
function union(a: readonly number[], b: readonly number[]): readonly number[] {
  if (a === b || b.length === 0) return a;
  if (a.length === 0) return b;
  return [...new Set([...a, ...b])].sort((x, y) => x - y);
}
