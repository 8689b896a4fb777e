import { CommitGraph } from "../../shared/history/commitGraph.ts";
import { goodElsewhere } from "../../shared/history/goodElsewhere.ts";
import { nextTest } from "../../shared/history/nextTest.ts";
import { partitionEntries } from "../../shared/history/partitionEntries.ts";
import { traceEntries } from "../../shared/history/traceEntries.ts";
import type { Test, TracedBreak } from "../../shared/history/types.ts";
import { integerBetween, mulberry32 } from "../../tests/support/random.ts";
import { randomHistory } from "../../tests/support/randomHistory.ts";

/** Prints what tracing costs on a long history, and how near the next tests come to log2 of the suspects. */
export async function run(): Promise<void> {
  await Promise.resolve();
  traceOfLongHistory();
  surplusOfNextTests();
  partitionOfLargeBlock();
}

function traceOfLongHistory(): void {
  const history = randomHistory(mulberry32(5), { commits: 5_000, fork: 0.15, merge: 0.18, fix: 1 });
  const built = median(() => CommitGraph.from(history.nodes));
  const graph = CommitGraph.from(history.nodes);
  const random = mulberry32(6);
  const tests = new Map([...history.truth].filter(() => random() < 0.5));
  const bare = median(() => countTests(graph, tests));
  const traced = median(() => traceEntries(graph, tests));
  const [last] = [...history.truth].filter(([, test]) => test === "bad").slice(-1);
  const untested = new Map<string, Test>([last!]);
  const suspects = traceEntries(graph, untested)[0]!.suspects;
  const next = median(() => nextTest(graph, suspects, { tested: untested, goodElsewhere: [] }));
  console.info(`graph of 5,000 commits: ${built.toFixed(1)} ms`);
  console.info(
    `trace of 5,000 commits, half of them tested: ${traced.toFixed(2)} ms, ${ratio(traced, bare)} a bare visit`,
  );
  console.info(`next test of ${suspects.length} suspects: ${next.toFixed(1)} ms`);
}

/** The least that any tracing must do: look at every commit, its parents and its test once. */
function countTests(graph: CommitGraph, tests: ReadonlyMap<string, Test>): number {
  let count = 0;
  for (let place = 0; place < graph.size; place++) {
    for (const parent of graph.parentsAt(place)) if (parent < place) count += 1;
    if (tests.has(graph.shaAt(place))) count += 1;
  }
  return count;
}

function surplusOfNextTests(): void {
  const histories = 2_000;
  const random = mulberry32(2_000);
  let surplus = 0;
  let overBound = 0;
  for (let at = 0; at < histories; at++) {
    const options = { commits: integerBetween(random, 12, 66), fork: 0.25, merge: 0.25, fix: 0.3 };
    const { builds, suspects } = hunt(random, options);
    surplus += builds - Math.log2(suspects);
    if (builds > Math.ceil(1.71 * Math.log2(suspects)) + 2) overBound += 1;
  }
  const mean = (surplus / histories).toFixed(2);
  console.info(`next tests on 2,000 random histories: log2 n + ${mean} builds in the mean (published trial: + 0.42)`);
  console.info(`  hunts that took more than ceil(1.71 log2 n) + 2 builds: ${overBound}`);
}

function hunt(random: () => number, options: Parameters<typeof randomHistory>[1]) {
  const { nodes, truth } = randomHistory(random, options);
  const graph = CommitGraph.from(nodes);
  const bads = [...truth].filter(([, test]) => test === "bad");
  const tests = new Map([...truth].filter(() => random() < 0.15));
  const [bad] = bads[integerBetween(random, 0, bads.length - 1)]!;
  tests.set(bad, "bad");
  const breakOf = (sha: string): TracedBreak => traceEntries(graph, tests).find((one) => one.bad.includes(sha))!;
  let found = breakOf(bad);
  const suspects = found.suspects.length;
  for (let builds = 0; ; builds++) {
    const elsewhere = goodElsewhere(graph, found.onset, tests);
    const next = nextTest(graph, found.suspects, { tested: tests, goodElsewhere: elsewhere });
    if (next === null) return { builds, suspects };
    tests.set(next.commit, truth.get(next.commit)!);
    found = breakOf(found.onset);
  }
}

function partitionOfLargeBlock(): void {
  const planes = Array.from({ length: 50 }, () => new Uint8Array(1_000_000));
  planes.forEach((plane, at) => plane.fill(1, at * 10, at * 10 + 25));
  const bare = median(() => planes.reduce((sum, plane) => sum + plane.reduce((bad, code) => bad + code, 0), 0));
  const split = median(() => partitionEntries(planes));
  console.info(
    `classes of 1,000,000 entries in 50 planes: ${split.toFixed(0)} ms, ${ratio(split, bare)} a bare sum of the bytes`,
  );
}

function median(work: () => unknown): number {
  const times = Array.from({ length: 9 }, () => {
    const started = performance.now();
    work();
    return performance.now() - started;
  });
  return times.sort((a, b) => a - b)[4]!;
}

function ratio(time: number, bare: number): string {
  return `${(time / bare).toFixed(1)} times`;
}
