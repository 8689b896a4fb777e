import { describe, expect, it } from "vitest";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import type { Test } from "../../../shared/history/types.ts";
import { mulberry32, shuffled } from "../../support/random.ts";
import { graphOf, testsOf } from "./graphs.ts";

const line = graphOf(["a-b-c-d-e-f-g-h"]);

describe("an onset and its suspects", () => {
  it("is the first bad commit after good ones; the untested commits between are suspects with it", () => {
    expect(traceEntries(line, testsOf("ab", "e"))).toEqual([
      {
        onset: "e",
        lastGood: "b",
        suspects: ["c", "d", "e"],
        kind: "after-good",
        fixedBetween: null,
        historyIncomplete: false,
        bad: ["e"],
        repairedBy: null,
      },
    ]);
  });

  it("does not exist without a bad commit", () => {
    expect(traceEntries(line, testsOf("abc", ""))).toEqual([]);
    expect(traceEntries(line, new Map())).toEqual([]);
    expect(traceEntries(CommitGraph.from([]), testsOf("", "a"))).toEqual([]);
  });

  it("names one commit where its parent was good", () => {
    expect(traceEntries(line, testsOf("d", "e"))[0]!.suspects).toEqual(["e"]);
  });

  it("is carried by bad descendants, whatever lies untested between", () => {
    const [found, ...others] = traceEntries(line, testsOf("b", "dfg"));
    expect(others).toEqual([]);
    expect(found).toMatchObject({ onset: "d", suspects: ["c", "d"], bad: ["d", "f", "g"] });
  });

  it("is bad since the first check where no ancestor was tested: every known ancestor is suspect", () => {
    expect(traceEntries(line, testsOf("", "cd"))).toMatchObject([
      { onset: "c", kind: "since-first-check", lastGood: null, suspects: ["a", "b", "c"], bad: ["c", "d"] },
    ]);
  });

  it("clears through every good ancestor, of whatever parent", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["b"], x: ["a"], y: ["x"], m: ["c", "y"] });
    expect(traceEntries(graph, testsOf("by", "m"))[0]).toMatchObject({ suspects: ["c", "m"], lastGood: "b" });
    expect(traceEntries(graph, testsOf("b", "m"))[0]).toMatchObject({
      suspects: ["x", "y", "c", "m"].sort(byPlace(graph)),
    });
  });

  it("takes the last good commit from the line of first parents, else the nearest", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["b"], x: ["a"], m: ["c", "x"] });
    expect(traceEntries(graph, testsOf("ax", "m"))[0]!.lastGood).toBe("a");
    expect(traceEntries(graph, testsOf("x", "m"))[0]!.lastGood).toBe("x");
  });

  it("does not look past the nearest tested ancestors: an older break stays its own", () => {
    const found = traceEntries(line, testsOf("ac", "be"));
    expect(found.map(({ onset, suspects, repairedBy }) => ({ onset, suspects, repairedBy }))).toEqual([
      { onset: "b", suspects: ["b"], repairedBy: "c" },
      { onset: "e", suspects: ["d", "e"], repairedBy: null },
    ]);
  });

  it("says where a suspect's parents were never told", () => {
    const graph = graphOf({ b: ["unknown"], c: ["b"], d: ["c"], e: ["d"] });
    expect(traceEntries(graph, testsOf("", "d"))[0]).toMatchObject({
      suspects: ["b", "c", "d"],
      historyIncomplete: true,
    });
    expect(traceEntries(graph, testsOf("c", "e"))[0]).toMatchObject({ suspects: ["d", "e"], historyIncomplete: false });
  });

  it("passes over tests of commits that are not in the graph", () => {
    expect(traceEntries(line, testsOf("bz", "dy"))).toMatchObject([{ onset: "d", bad: ["d"] }]);
  });
});

describe("late builds", () => {
  it("move the onset back when a suspect is bad", () => {
    const tests = testsOf("a", "f");
    expect(traceEntries(line, tests)[0]).toMatchObject({ onset: "f", suspects: ["b", "c", "d", "e", "f"] });
    tests.set("d", "bad");
    expect(traceEntries(line, tests)).toMatchObject([{ onset: "d", suspects: ["b", "c", "d"], bad: ["d", "f"] }]);
  });

  it("shorten the list when a suspect is good", () => {
    const tests = testsOf("a", "f").set("d", "good");
    expect(traceEntries(line, tests)).toMatchObject([{ onset: "f", suspects: ["e", "f"], lastGood: "d" }]);
  });

  it("join two onsets when the commit that both come from is bad, and part a break when a commit within is good", () => {
    const fork = graphOf({ a: [], b: ["a"], p: ["b"], q: ["b"] });
    const tests = testsOf("a", "pq");
    expect(traceEntries(fork, tests).map(({ onset, suspects }) => [onset, suspects])).toEqual([
      ["p", ["b", "p"]],
      ["q", ["b", "q"]],
    ]);
    expect(traceEntries(fork, tests.set("b", "bad"))).toMatchObject([{ onset: "b", bad: ["b", "p", "q"] }]);
    expect(traceEntries(line, testsOf("ad", "bf")).map(({ onset }) => onset)).toEqual(["b", "f"]);
  });

  it("end in the same record in whatever order commits and tests are told", () => {
    const parents = { a: [], b: ["a"], c: ["b"], x: ["a"], y: ["x"], m: ["c", "y"], n: ["m"], o: ["n"], z: ["y"] };
    const nodes = Object.entries(parents).map(([sha, list]) => ({ sha, parents: list, committedAt: null }));
    const tests = [...testsOf("axo", "cnz")];
    const expected = traceEntries(CommitGraph.from(nodes), new Map(tests));
    for (let seed = 1; seed <= 30; seed++) {
      const random = mulberry32(seed);
      const graph = CommitGraph.from(shuffled(random, nodes));
      expect(traceEntries(graph, new Map(shuffled(random, tests)))).toEqual(expected);
    }
  });
});

describe("merges and lines", () => {
  const parents = { a: [], b: ["a"], c: ["b"], x: ["a"], y: ["x"], m: ["c", "y"], n: ["m"] };
  const graph = graphOf(parents);

  it("carry a known bad commit in: the same break", () => {
    expect(traceEntries(graph, testsOf("ac", "ym"))).toMatchObject([
      { onset: "y", suspects: ["x", "y"], bad: ["y", "m"] },
    ]);
    expect(traceEntries(graph, testsOf("ac", "yn"))).toMatchObject([{ onset: "y", bad: ["y", "n"] }]);
  });

  it("belong to both breaks where both lines were bad", () => {
    expect(traceEntries(graph, testsOf("a", "cym")).map(({ onset, bad }) => [onset, bad])).toEqual([
      ["c", ["c", "m"]],
      ["y", ["y", "m"]],
    ]);
  });

  it("are themselves guilty where both parents were good", () => {
    expect(traceEntries(graph, testsOf("cy", "m"))).toMatchObject([{ onset: "m", suspects: ["m"] }]);
  });

  it("never let a good commit elsewhere clear", () => {
    const forked = graphOf({ a: [], b: ["a"], c: ["b"], d: ["c"], s: ["b"] });
    expect(traceEntries(forked, testsOf("as", "d"))[0]!.suspects).toEqual(["b", "c", "d"]);
    expect(traceEntries(forked, testsOf("s", "d"))[0]).toMatchObject({
      suspects: ["a", "b", "c", "d"],
      kind: "since-first-check",
      lastGood: null,
    });
  });

  it("tell that a fix lies between a bad merge base and the good line", () => {
    const forked = graphOf(["a-b-c-d-e", "b-s-t"]);
    const [found] = traceEntries(forked, testsOf("t", "bd"));
    expect(found).toMatchObject({ kind: "fixed-between", fixedBetween: { bad: "b", good: "t" }, suspects: ["a", "b"] });
    // Whoever was good before the break still says where it came from.
    expect(traceEntries(forked, testsOf("at", "bd"))[0]).toMatchObject({
      kind: "after-good",
      lastGood: "a",
      fixedBetween: { bad: "b", good: "t" },
    });
    expect(traceEntries(forked, testsOf("a", "bd"))[0]).toMatchObject({ kind: "after-good", fixedBetween: null });
  });
});

describe("repair", () => {
  it("is the first tested descendant at which the entries agree", () => {
    expect(traceEntries(line, testsOf("afg", "cd"))).toMatchObject([{ onset: "c", repairedBy: "f" }]);
    expect(traceEntries(line, testsOf("a", "cd"))[0]!.repairedBy).toBeNull();
  });

  it("is moved by late builds", () => {
    expect(traceEntries(line, testsOf("ag", "c"))[0]!.repairedBy).toBe("g");
    expect(traceEntries(line, testsOf("aeg", "c"))[0]!.repairedBy).toBe("e");
    expect(traceEntries(line, testsOf("ag", "cf"))[0]!.repairedBy).toBe("g");
  });

  it("ends the break: a return is a new one", () => {
    expect(
      traceEntries(line, testsOf("adg", "bf")).map(({ onset, bad, repairedBy }) => [onset, bad, repairedBy]),
    ).toEqual([
      ["b", ["b"], "d"],
      ["f", ["f"], "g"],
    ]);
  });

  it("does not count where a merge brings the break back", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["b"], x: ["b"], m: ["c", "x"], n: ["m"] });
    expect(traceEntries(graph, testsOf("ac", "bx"))[0]!.repairedBy).toBe("c");
    expect(traceEntries(graph, testsOf("ac", "bxm"))).toMatchObject([
      { onset: "b", bad: ["b", "x", "m"], repairedBy: null },
    ]);
    expect(traceEntries(graph, testsOf("acn", "bxm"))[0]!.repairedBy).toBe("n");
  });

  it("is looked for in the history of a tip where one is given", () => {
    const graph = graphOf({ a: [], b: ["a"], c: ["b"], x: ["b"], y: ["x"] });
    const tests = testsOf("acy", "b");
    const repairOn = (tip: string) => traceEntries(graph, tests, { tip })[0]!.repairedBy;
    expect(["b", "c", "x", "y"].map(repairOn)).toEqual([null, "c", null, "y"]);
    expect(() => repairOn("gone")).toThrow(RangeError);
  });
});

describe("long histories", () => {
  it("of 20,000 commits in a line are followed without recursion", () => {
    const shas = Array.from({ length: 20_000 }, (_, at) => `s${at}`);
    const long = graphOf([shas.join("-")]);
    const tests = new Map<string, Test>([["s19999", "bad"]]);
    expect(traceEntries(long, tests)[0]!.suspects).toHaveLength(20_000);
    expect(traceEntries(long, tests.set("s0", "good"))[0]!.suspects).toHaveLength(19_999);
  });

  it("of 20,000 commits that break and mend all the time take seconds at most", () => {
    const shas = Array.from({ length: 20_000 }, (_, at) => `s${at}`);
    const long = graphOf([shas.join("-")]);
    const tests = new Map<string, Test>(shas.map((sha, at) => [sha, at % 2 === 0 ? "good" : "bad"]));
    const started = performance.now();
    const found = traceEntries(long, tests);
    expect(found).toHaveLength(10_000);
    expect(found.every(({ suspects }) => suspects.length === 1)).toBe(true);
    expect(performance.now() - started).toBeLessThan(5_000);
  });
});

function byPlace(graph: CommitGraph): (a: string, b: string) => number {
  return (a, b) => graph.placeOf(a) - graph.placeOf(b);
}
