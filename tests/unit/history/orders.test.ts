import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { commitOrder } from "../../../shared/history/commitOrder.ts";
import { nearestJudgedAncestor } from "../../../shared/history/nearestJudgedAncestor.ts";
import { mulberry32, shuffled } from "../../support/random.ts";
import { randomHistory } from "../../support/randomHistory.ts";
import { graphOf } from "./graphs.ts";

describe("commitOrder", () => {
  const graph = graphOf({ a: [], b: ["a"], x: ["a"], y: ["x"], m: ["b", "y"], n: ["m"], s: ["b"] });

  it("puts a merged branch together, right before its merge, after the line of first parents", () => {
    expect(commitOrder(graph, ["n"])).toEqual(["a", "b", "x", "y", "m", "n"]);
  });

  it("adds what further tips have, and lists only what a tip reaches", () => {
    expect(commitOrder(graph, ["m", "s"])).toEqual(["a", "b", "x", "y", "m", "s"]);
    expect(commitOrder(graph, ["b", "y"])).toEqual(["a", "b", "x", "y"]);
    expect(commitOrder(graph, [])).toEqual([]);
    expect(commitOrder(graph, ["gone", "b", "b"])).toEqual(["a", "b"]);
  });

  it("lists parents first, each commit once, and only grows at the end", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 31 }), (seed) => {
        const random = mulberry32(seed);
        const { nodes } = randomHistory(random, { commits: 40, fork: 0.3, merge: 0.3, fix: 0 });
        const any = CommitGraph.from(shuffled(random, nodes));
        const tip = nodes[nodes.length - 1]!;
        const order = commitOrder(any, [tip.sha]);
        expect(new Set(order)).toEqual(any.ancestors(tip.sha));
        const at = new Map(order.map((sha, place) => [sha, place]));
        for (const sha of order) expect(any.parents(sha).every((parent) => at.get(parent)! < at.get(sha)!)).toBe(true);
        const first = any.parents(tip.sha)[0];
        if (first !== undefined) {
          const before = commitOrder(any, [first]);
          expect(order.slice(0, before.length)).toEqual(before);
        }
      }),
      { numRuns: 60 },
    );
  });

  it("goes 20,000 commits deep", () => {
    const line = Array.from({ length: 20_000 }, (_, at) => `c${at}`);
    expect(commitOrder(graphOf([line.join("-")]), ["c19999"])).toEqual(line);
  });
});

describe("nearestJudgedAncestor", () => {
  const graph = graphOf({ a: [], b: ["a"], x: ["a"], y: ["x"], m: ["b", "y"], n: ["m"] });

  it("is the nearest by steps, never the commit itself", () => {
    expect(nearestJudgedAncestor(graph, "n", (sha) => "ax".includes(sha))).toBe("a");
    expect(nearestJudgedAncestor(graph, "n", (sha) => "ny".includes(sha))).toBe("y");
  });

  it("is the one on the earlier parent between equally near ones", () => {
    expect(nearestJudgedAncestor(graph, "n", (sha) => "by".includes(sha))).toBe("b");
    const other = graphOf({ a: [], b: ["a"], y: ["a"], m: ["y", "b"] });
    expect(nearestJudgedAncestor(other, "m", (sha) => "by".includes(sha))).toBe("y");
  });

  it("is null where there is none, or the commit is not known", () => {
    expect(nearestJudgedAncestor(graph, "n", () => false)).toBeNull();
    expect(nearestJudgedAncestor(graph, "gone", () => true)).toBeNull();
  });
});
