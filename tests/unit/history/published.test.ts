import { describe, expect, it } from "vitest";
import { suspectWeights } from "../../../shared/history/suspectWeights.ts";
import { goodElsewhere } from "../../../shared/history/goodElsewhere.ts";
import { mergeBase } from "../../../shared/history/mergeBase.ts";
import { nextTest } from "../../../shared/history/nextTest.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import type { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { graphOf, hunt, testsOf } from "./graphs.ts";
import published from "./reference/commitGraphs.json";

/** min(n, N - n) of each suspect of the one bad commit. */
function values(graph: CommitGraph, bad: string): Record<string, number> {
  const [found] = traceEntries(graph, new Map([[bad, "bad"]]));
  const places = found!.suspects.map((sha) => graph.placeOf(sha));
  const weights = suspectWeights(graph, places);
  return Object.fromEntries(
    found!.suspects.map((sha, at) => [sha, Math.min(weights[at]!, places.length - weights[at]!)]),
  );
}

function firstTest(graph: CommitGraph, bad: string): string {
  const [found] = traceEntries(graph, new Map([[bad, "bad"]]));
  return nextTest(graph, found!.suspects, { tested: new Set([bad]), goodElsewhere: [] })!.commit;
}

/**
 * Most builds that the halving rule takes, over every commit that may be guilty, counted as the publications count: a
 * good commit clears its ancestors for good, whatever line the search goes on with.
 */
function worstBuilds(graph: CommitGraph, bad: string): number {
  const builds = [...graph.ancestors(bad)].map((guilty) => {
    const tested = new Set([bad]);
    let suspects = [...graph.ancestors(bad)];
    for (;;) {
      const next = nextTest(graph, suspects, { tested, goodElsewhere: [] });
      if (next === null) break;
      const isBad = graph.isAncestor(guilty, next.commit);
      suspects = suspects.filter((sha) => graph.isAncestor(sha, next.commit) === isBad);
      expect(suspects.length).toBeLessThanOrEqual(next.remainingAfter);
      tested.add(next.commit);
    }
    expect(suspects).toEqual([guilty]);
    return tested.size - 1;
  });
  return Math.max(...builds);
}

/** Most builds with suspects as they are traced here: only good ancestors of the onset clear, which may cost a build. */
function worstTracedBuilds(graph: CommitGraph, bad: string): number {
  const builds = [...graph.ancestors(bad)].map((guilty) => {
    const truth = (sha: string) => (graph.isAncestor(guilty, sha) ? "bad" : "good");
    const result = hunt(graph, new Map([[bad, "bad"]]), bad, truth);
    expect(result.found.suspects).toEqual([guilty]);
    return result.builds.length;
  });
  return Math.max(...builds);
}

// Source: C. Couder, Fighting regressions with git bisect, LinuxCon 2009; read in a public copy of the document.
describe("graphs published with the halving rule", () => {
  it("gives the published weights and values, and the published best test, of the first graph", () => {
    const { parents, bad, weight, value, best, optimalWorst } = published.graph1;
    const graph = graphOf(parents);
    for (const [sha, n] of Object.entries(weight)) expect(graph.ancestors(sha).size).toBe(n);
    expect(values(graph, bad)).toEqual(value);
    expect(best).toContain(firstTest(graph, bad));
    expect(worstBuilds(graph, bad)).toBe(optimalWorst);
  });

  it("gives the published values and one of the published best tests of the second graph", () => {
    const { lines, bad, value, best, optimalWorst } = published.graph2;
    const graph = graphOf(lines);
    expect(values(graph, bad)).toEqual(value);
    expect(best).toContain(firstTest(graph, bad));
    expect(worstBuilds(graph, bad)).toBeLessThanOrEqual(Math.ceil(published.ratio.value * optimalWorst));
  });

  it("tests the merge base first where a good commit is no ancestor of the bad one, and finds the fix", () => {
    const { lines, good, bad, firstToTest, wronglyBlamed, introducedIn, fixedIn } = published.fixedElsewhere;
    const graph = graphOf(lines);
    const tests = testsOf(good, bad);
    const [before] = traceEntries(graph, tests);
    expect(mergeBase(graph, good, bad)).toEqual([firstToTest]);
    const elsewhere = goodElsewhere(graph, bad, tests);
    expect(elsewhere).toEqual([good]);
    expect(nextTest(graph, before!.suspects, { tested: tests, goodElsewhere: elsewhere })).toMatchObject({
      commit: firstToTest,
      why: "merge-base",
    });

    tests.set(firstToTest, "bad");
    const [after, ...others] = traceEntries(graph, tests);
    expect(others).toEqual([]);
    expect(after).toMatchObject({
      onset: firstToTest,
      kind: "fixed-between",
      fixedBetween: { bad: firstToTest, good },
      suspects: ["A", "B", "C", "D"],
      bad: [firstToTest, bad],
    });
    expect(after!.suspects).not.toContain(wronglyBlamed);

    const isBad = graph.descendants(introducedIn);
    const mended = graph.descendants(fixedIn);
    const truth = (sha: string) => (isBad.has(sha) && !mended.has(sha) ? "bad" : "good");
    expect(hunt(graph, tests, bad, truth).found.suspects).toEqual([introducedIn]);
  });
});

// Source: J. Courtiel, P. Dorbec, R. Lecoq, Algorithmica 86(5):1365-1399, 2024; abstract read in a public copy.
describe("bounds published for the halving rule", () => {
  it.each(published.linear.n.map((n, at) => [n, published.linear.worst[at]!]))(
    "names the guilty one of %i commits on a line in at most %i builds",
    (n, worst) => {
      const line = Array.from({ length: n }, (_, at) => `c${at}`).join("-");
      expect(worstBuilds(graphOf([line]), `c${n - 1}`)).toBe(worst);
    },
  );

  // Source: cs.stackexchange.com question 22451, read in a public copy.
  it("needs a build of every parent of a merge of seven lines", () => {
    const { parents, bad, worst } = published.octopus7;
    expect(worstBuilds(graphOf(parents), bad)).toBe(worst);
  });

  // Computed by trying all plans; no publication.
  it("takes either side of a diamond first", () => {
    const { parents, bad, best, worst } = published.diamond;
    const graph = graphOf(parents);
    expect(best).toContain(firstTest(graph, bad));
    expect(worstBuilds(graph, bad)).toBe(worst);
    expect(worstTracedBuilds(graph, bad)).toBeLessThanOrEqual(worst + 1);
  });

  // Computed by exhaustive dynamic programming; no publication.
  it("is greedy, not the best plan, on nine commits, and stays within the published ratio", () => {
    const { parents, bad, value, best, greedyWorst, optimalWorst } = published.greedyNotOptimal9;
    const graph = graphOf(parents);
    expect(values(graph, bad)).toEqual(value);
    expect(best).toContain(firstTest(graph, bad));
    expect(worstBuilds(graph, bad)).toBe(greedyWorst);
    expect(greedyWorst / optimalWorst).toBeLessThanOrEqual(published.ratio.value);
    expect(worstTracedBuilds(graph, bad)).toBeLessThanOrEqual(Math.ceil(1.71 * Math.log2(9)) + 2);
  });
});
