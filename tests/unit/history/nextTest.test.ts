import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { containedInGood } from "../../../shared/history/containedInGood.ts";
import { goodElsewhere } from "../../../shared/history/goodElsewhere.ts";
import { nextTest } from "../../../shared/history/nextTest.ts";
import { suspectWeights } from "../../../shared/history/suspectWeights.ts";
import { mulberry32, shuffled } from "../../support/random.ts";
import { randomHistory } from "../../support/randomHistory.ts";
import { graphOf, testsOf } from "./graphs.ts";

const line = graphOf(["a-b-c-d-e-f-g-h"]);
const alone = { tested: new Set(["h"]), goodElsewhere: [] };

describe("nextTest", () => {
  it("halves the suspects", () => {
    expect(nextTest(line, "abcdefgh", alone)).toEqual({ commit: "d", remainingAfter: 4, why: "halves" });
  });

  it("takes the newer of equally good suspects", () => {
    expect(nextTest(line, "abcde", alone)).toEqual({ commit: "c", remainingAfter: 3, why: "halves" });
    expect(nextTest(line, "abc", alone)!.commit).toBe("b");
  });

  it("does not depend on the order of the suspects", () => {
    expect(nextTest(line, "hgacdbef", alone)).toEqual(nextTest(line, "abcdefgh", alone));
  });

  it("is null when one suspect is left, or none", () => {
    expect(nextTest(line, "h", alone)).toBeNull();
    expect(nextTest(line, "hhh", alone)).toBeNull();
    expect(nextTest(line, "", alone)).toBeNull();
  });

  it("passes over commits that were built and could not tell, and is null when all were", () => {
    expect(nextTest(line, "efgh", { tested: new Set("fh"), goodElsewhere: [] })).toMatchObject({
      commit: "g",
      remainingAfter: 3,
    });
    expect(nextTest(line, "efgh", { tested: new Set("efgh"), goodElsewhere: [] })).toBeNull();
  });

  it("passes over suspects that are not in the graph", () => {
    expect(nextTest(line, ["c", "gone", "d"], { tested: new Set("d"), goodElsewhere: [] })).toMatchObject({
      commit: "c",
      remainingAfter: 1,
    });
  });

  describe("with a good commit on another line", () => {
    const forked = graphOf(["a-b-c-d-e-f-g-h", "b-s-t", "d-u"]);
    const suspects = "abcdefgh";

    it("asks for the merge base, though another commit would halve better", () => {
      expect(nextTest(forked, suspects, { tested: testsOf("t", "h"), goodElsewhere: ["t"] })).toEqual({
        commit: "b",
        remainingAfter: 6,
        why: "merge-base",
      });
    });

    it("asks for the newest of several on one line, as it speaks for the older", () => {
      expect(nextTest(forked, suspects, { tested: testsOf("tu", "h"), goodElsewhere: ["t", "u"] })!.commit).toBe("d");
    });

    it("halves again once the merge base was built", () => {
      expect(nextTest(forked, "cdefgh", { tested: testsOf("tb", "h"), goodElsewhere: ["t"] })!.why).toBe("halves");
      expect(nextTest(forked, suspects, { tested: new Set("hb"), goodElsewhere: ["t"] })).toMatchObject({
        commit: "d",
        why: "halves",
      });
    });

    it("does not listen to commits that are unknown, of unrelated history, or after the onset", () => {
      const graph = graphOf(["a-b-c-d-e", "y-z"]);
      const next = nextTest(graph, "abcd", { tested: new Set("d"), goodElsewhere: ["gone", "z", "e"] });
      expect(next).toMatchObject({ commit: "b", why: "halves" });
    });
  });
});

describe("goodElsewhere", () => {
  it("lists good commits that are neither ancestors nor descendants of the onset", () => {
    const graph = graphOf(["a-b-c-d-e", "b-s-t", "y-z"]);
    expect(goodElsewhere(graph, "c", testsOf("aestz", "cd"))).toEqual(
      ["s", "t", "z"].sort((a, b) => graph.placeOf(a) - graph.placeOf(b)),
    );
    expect(goodElsewhere(graph, "c", testsOf("x", "c"))).toEqual([]);
    expect(() => goodElsewhere(graph, "gone", new Map())).toThrow(RangeError);
  });
});

describe("containedInGood", () => {
  it("lists the suspects that a good commit holds", () => {
    const graph = graphOf(["a-b-c-d-e", "b-s-t"]);
    expect([...containedInGood(graph, ["a", "b", "c", "d", "gone"], ["t", "away"])]).toEqual(["a", "b"]);
    expect(containedInGood(graph, ["a"], []).size).toBe(0);
  });
});

describe("suspectWeights", () => {
  it("counts each suspect once, whatever the ways to it", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 31 }), (seed) => {
        const random = mulberry32(seed);
        const { nodes } = randomHistory(random, { commits: 90, fork: 0.3, merge: 0.4, fix: 0 });
        const graph = CommitGraph.from(shuffled(random, nodes));
        const tip = nodes[nodes.length - 1]!.sha;
        const places = [...graph.ancestors(tip)].map((sha) => graph.placeOf(sha));
        const counted = [...suspectWeights(graph, places)];
        expect(counted).toEqual(places.map((place) => graph.ancestors(graph.shaAt(place)).size));
      }),
      { numRuns: 50 },
    );
  });
});
