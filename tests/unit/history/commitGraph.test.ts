import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CommitCycleError } from "../../../shared/history/commitCycleError.ts";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { mergeBase } from "../../../shared/history/mergeBase.ts";
import type { CommitNode } from "../../../shared/history/types.ts";
import { mulberry32, shuffled } from "../../support/random.ts";
import { randomHistory } from "../../support/randomHistory.ts";
import { graphOf, nodesOf } from "./graphs.ts";

const history = fc.integer({ min: 1, max: 2 ** 31 }).map((seed) => {
  const random = mulberry32(seed);
  return { random, nodes: randomHistory(random, { commits: 40, fork: 0.3, merge: 0.3, fix: 0 }).nodes };
});

/** Ancestors-or-self straight from the definition. */
function ancestorsByHand(nodes: readonly CommitNode[]): Map<string, Set<string>> {
  const found = new Map<string, Set<string>>();
  for (const { sha, parents } of nodes) {
    found.set(sha, new Set([sha, ...parents.flatMap((parent) => [...(found.get(parent) ?? [])])]));
  }
  return found;
}

describe("CommitGraph", () => {
  it("knows parents, children, ancestors and descendants of a fork and its merge", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["a"], m: ["c", "b"], n: ["m"] });
    expect(graph.size).toBe(5);
    expect(graph.has("m")).toBe(true);
    expect(graph.has("z")).toBe(false);
    expect(graph.parents("m")).toEqual(["c", "b"]);
    expect(graph.children("a")).toEqual(["b", "c"]);
    expect([...graph.ancestors("m")]).toEqual(["a", "b", "c", "m"]);
    expect([...graph.descendants("b")]).toEqual(["b", "m", "n"]);
    expect(graph.isAncestor("b", "n")).toBe(true);
    expect(graph.isAncestor("n", "n")).toBe(true);
    expect(graph.isAncestor("b", "c")).toBe(false);
    expect(graph.isAncestor("n", "b")).toBe(false);
  });

  it("is empty without nodes", () => {
    expect(CommitGraph.from([]).topological()).toEqual([]);
  });

  it("leaves out parents that were never told, and says which commits have such", () => {
    const graph = graphOf({ b: ["gone"], c: ["b", "away"] });
    expect(graph.parents("b")).toEqual([]);
    expect(graph.parents("c")).toEqual(["b"]);
    expect([graph.hasUnknownParents("b"), graph.hasUnknownParents("c")]).toEqual([true, true]);
    expect(graphOf({ a: [] }).hasUnknownParents("a")).toBe(false);
  });

  it("refuses to answer for a commit that it does not know", () => {
    const graph = graphOf({ a: [] });
    expect(() => graph.parents("z")).toThrow(RangeError);
    expect(() => graph.ancestors("z")).toThrow(/z is not in the graph/);
    expect(() => graph.isAncestor("a", "z")).toThrow(RangeError);
  });

  it.each([
    ["a commit that is its own parent", { a: ["a"] }, ["a"]],
    ["two commits", { a: ["b"], b: ["a"] }, ["a", "b"]],
    ["a circle beside sound history", { r: [], a: ["r", "c"], b: ["a"], c: ["b"], d: ["c"] }, ["a", "b", "c"]],
  ])("refuses %s in a circle and names it", (_, parents, circle) => {
    const build = () => graphOf(parents);
    expect(build).toThrow(CommitCycleError);
    try {
      build();
    } catch (error) {
      expect(error).toBeInstanceOf(CommitCycleError);
      if (error instanceof CommitCycleError) expect([...error.shas].sort()).toEqual(circle);
    }
  });

  it("says no more than a few shas of a long circle", () => {
    const nodes = Array.from({ length: 5000 }, (_, at) => ({
      sha: `s${at}`,
      parents: [`s${(at + 1) % 5000}`],
      committedAt: null,
    }));
    expect(() => CommitGraph.from(nodes)).toThrow(/run in a circle: s\d+(, s\d+){4} and 4995 more\.$/);
  });

  it("makes one commit of many tellings, whatever their order", () => {
    const tellings: CommitNode[] = [
      { sha: "c", parents: [], committedAt: null },
      { sha: "c", parents: ["a", "b"], committedAt: 30 },
      { sha: "c", parents: ["a"], committedAt: 20 },
      { sha: "c", parents: ["a", "b", "a"], committedAt: null },
      { sha: "a", parents: [], committedAt: 50 },
      { sha: "b", parents: [], committedAt: 40 },
    ];
    for (const order of [tellings, [...tellings].reverse()]) {
      const graph = CommitGraph.from(order);
      expect(graph.parents("c")).toEqual(["a", "b"]);
      expect(graph.topological()).toEqual(["b", "a", "c"]);
    }
  });

  it("breaks ties by time, then by sha; a commit without a time comes as early as it may", () => {
    const node = (sha: string, parents: string[], committedAt: number | null) => ({ sha, parents, committedAt });
    const nodes = [
      node("r", [], 10),
      node("z", ["r"], 20),
      node("y", ["r"], 30),
      node("x", ["r"], 30),
      node("w", ["y"], null),
    ];
    expect(CommitGraph.from(nodes).topological()).toEqual(["r", "z", "x", "y", "w"]);
  });

  it("answers as the definitions do, in any order of nodes", () => {
    fc.assert(
      fc.property(history, ({ random, nodes }) => {
        const graph = CommitGraph.from(nodes);
        const order = graph.topological();
        expect(CommitGraph.from(shuffled(random, nodes)).topological()).toEqual(order);
        const byHand = ancestorsByHand(nodes);
        for (const { sha, parents } of nodes) {
          expect(parents.every((parent) => order.indexOf(parent) < order.indexOf(sha))).toBe(true);
          expect(graph.ancestors(sha)).toEqual(byHand.get(sha));
          const below = nodes.filter((other) => byHand.get(other.sha)!.has(sha)).map((other) => other.sha);
          expect(graph.descendants(sha)).toEqual(new Set(below));
        }
      }),
      { numRuns: 60 },
    );
  });

  it("holds 50,000 commits 50,000 deep without recursion", () => {
    const nodes = Array.from({ length: 50_000 }, (_, at) => ({
      sha: `s${at}`,
      parents: at === 0 ? [] : [`s${at - 1}`],
      committedAt: at,
    }));
    const graph = CommitGraph.from(shuffled(mulberry32(1), nodes));
    expect(graph.ancestors("s49999").size).toBe(50_000);
    expect(graph.descendants("s0").size).toBe(50_000);
    expect(graph.isAncestor("s1", "s49998")).toBe(true);
    expect(mergeBase(graph, "s17", "s49999")).toEqual(["s17"]);
  });
});

describe("mergeBase", () => {
  it("is the ancestor itself, the fork of a fork, and nothing between unrelated histories", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["b"], d: ["b"], z: [] });
    expect(mergeBase(graph, "b", "d")).toEqual(["b"]);
    expect(mergeBase(graph, "d", "d")).toEqual(["d"]);
    expect(mergeBase(graph, "c", "d")).toEqual(["b"]);
    expect(mergeBase(graph, "c", "z")).toEqual([]);
    expect(() => mergeBase(graph, "c", "gone")).toThrow(RangeError);
  });

  it("is both after criss-cross merges", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["a"], p: ["b", "c"], q: ["c", "b"] });
    expect(mergeBase(graph, "p", "q")).toEqual(["c", "b"]);
  });

  it("is every common ancestor that is below no other one", () => {
    fc.assert(
      fc.property(history, fc.nat(39), fc.nat(39), ({ nodes }, first, second) => {
        const [a, b] = [nodes[first]!.sha, nodes[second]!.sha];
        const byHand = ancestorsByHand(nodes);
        const common = [...byHand.get(a)!].filter((sha) => byHand.get(b)!.has(sha));
        const best = common.filter((sha) => !common.some((other) => other !== sha && byHand.get(other)!.has(sha)));
        const graph = CommitGraph.from(nodes);
        expect(new Set(mergeBase(graph, a, b))).toEqual(new Set(best));
        expect(mergeBase(graph, a, b)).toEqual(mergeBase(graph, b, a));
      }),
    );
  });
});

describe("nodesOf", () => {
  it("reads lines", () => {
    expect(nodesOf(["a-b", "a-c-b"]).map(({ sha, parents }) => [sha, parents])).toEqual([
      ["a", []],
      ["b", ["a", "c"]],
      ["c", ["a"]],
    ]);
  });
});
