import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { goodElsewhere } from "../../../shared/history/goodElsewhere.ts";
import { nextTest } from "../../../shared/history/nextTest.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import type { CommitNode, Test, TracedBreak } from "../../../shared/history/types.ts";

/** Nodes from a table of parents; `lines` such as "A-B-C" say that A is a parent of B and B of C. */
export function nodesOf(source: Readonly<Record<string, readonly string[]>> | readonly string[]): CommitNode[] {
  const parents = new Map<string, string[]>();
  const known = (sha: string) => parents.get(sha) ?? parents.set(sha, []).get(sha)!;
  if (isLines(source)) {
    for (const line of source) {
      const shas = line.split("-");
      shas.forEach((sha, at) => (at === 0 ? known(sha) : known(sha).push(shas[at - 1]!)));
    }
  } else {
    for (const [sha, list] of Object.entries(source)) parents.set(sha, [...list]);
  }
  return [...parents].map(([sha, list]) => ({ sha, parents: list, committedAt: null }));
}

function isLines(source: Readonly<Record<string, readonly string[]>> | readonly string[]): source is readonly string[] {
  return Array.isArray(source);
}

export function graphOf(source: Readonly<Record<string, readonly string[]>> | readonly string[]): CommitGraph {
  return CommitGraph.from(nodesOf(source));
}

/** Tests from two lists of shas, each a string of one-letter names. */
export function testsOf(good: string, bad: string): Map<string, Test> {
  return new Map<string, Test>([
    ...[...good].map((sha): [string, Test] => [sha, "good"]),
    ...[...bad].map((sha): [string, Test] => [sha, "bad"]),
  ]);
}

export interface Hunt {
  /** The break after the last build. */
  readonly found: TracedBreak;
  /** Builds in the order in which they were asked for. */
  readonly builds: readonly string[];
  /** Suspects at the start. */
  readonly suspects: number;
}

/**
 * Follows the next tests of the break that a bad commit belongs to until none is offered. `tests` is filled with what
 * `truth` answers. `check` sees the break at every step.
 */
export function hunt(
  graph: CommitGraph,
  tests: Map<string, Test>,
  bad: string,
  truth: (sha: string) => Test,
  check: (found: TracedBreak) => void = () => undefined,
): Hunt {
  const builds: string[] = [];
  const breakOf = (sha: string) => traceEntries(graph, tests).find((one) => one.bad.includes(sha))!;
  let found = breakOf(bad);
  const suspects = found.suspects.length;
  for (;;) {
    check(found);
    const elsewhere = goodElsewhere(graph, found.onset, tests);
    const next = nextTest(graph, found.suspects, { tested: tests, goodElsewhere: elsewhere });
    if (next === null) return { found, builds, suspects };
    builds.push(next.commit);
    tests.set(next.commit, truth(next.commit));
    found = breakOf(found.onset);
  }
}
