import { describe, expect, it } from "vitest";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import type { Test } from "../../../shared/history/types.ts";
import { integerBetween, mulberry32, shuffled } from "../../support/random.ts";
import { randomHistory } from "../../support/randomHistory.ts";
import type { RandomHistory } from "../../support/randomHistory.ts";
import { hunt } from "./graphs.ts";

const HISTORIES = 600;
/** Largest factor between the halving rule and the best plan; source: see published.test.ts. Two builds of grace. */
const mostBuilds = (suspects: number) => Math.ceil(1.71 * Math.log2(suspects)) + 2;

/** A part of the commits is tested, one bad one for certain: the one to hunt from. */
function someTests(random: () => number, history: RandomHistory): { tests: Map<string, Test>; bad: string } {
  const share = 0.03 + 0.4 * random();
  const tests = new Map([...history.truth].filter(() => random() < share));
  const bads = [...history.truth].filter(([, test]) => test === "bad").map(([sha]) => sha);
  const bad = bads[integerBetween(random, 0, bads.length - 1)]!;
  return { tests: tests.set(bad, "bad"), bad };
}

describe.each([
  ["a mistake that nobody mends", 0, 20260301],
  ["a mistake that may be mended on some line", 0.6, 20260302],
])("random histories with %s", (_, fix, seed) => {
  it(`name the guilty commit in few enough builds, in each of ${HISTORIES}, whatever came first`, () => {
    const random = mulberry32(seed);
    let surplus = 0;
    for (let run = 0; run < HISTORIES; run++) {
      const options = { commits: integerBetween(random, 12, 66), fork: 0.25, merge: 0.25, fix };
      const history = randomHistory(random, options);
      const graph = CommitGraph.from(history.nodes);
      const { tests, bad } = someTests(random, history);
      for (const { suspects } of traceEntries(graph, tests)) expect(suspects).toContain(history.guilty);

      const { found, builds, suspects } = hunt(
        graph,
        tests,
        bad,
        (sha) => history.truth.get(sha)!,
        (step) => {
          expect(step.suspects).toContain(history.guilty);
        },
      );
      expect(found.suspects).toEqual([history.guilty]);
      expect(found.onset).toBe(history.guilty);
      expect(builds.length).toBeLessThanOrEqual(mostBuilds(suspects));
      surplus += builds.length - Math.log2(suspects);

      // Builds are repeated and late: the final record is that of the set of commits and tests alone.
      const again = CommitGraph.from(shuffled(random, [...history.nodes, ...history.nodes.slice(0, 9)]));
      expect(traceEntries(again, new Map(shuffled(random, [...tests])))).toEqual(traceEntries(graph, tests));
    }
    const mean = surplus / HISTORIES;
    console.info(
      `random histories (${_}): ${mean.toFixed(2)} builds more than log2 n in the mean (published trial: 0.42)`,
    );
    expect(mean).toBeLessThan(0.42);
  });

  it("tell one break where every commit is tested on a line, mended or not", () => {
    const random = mulberry32(seed + 7);
    for (let run = 0; run < 50; run++) {
      const history = randomHistory(random, { commits: 40, fork: 0, merge: 0, fix });
      const found = traceEntries(CommitGraph.from(history.nodes), history.truth);
      expect(found).toHaveLength(1);
      expect(found[0]).toMatchObject({ onset: history.guilty, suspects: [history.guilty], repairedBy: history.fix });
    }
  });
});
