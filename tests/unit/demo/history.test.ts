import { describe, expect, it } from "vitest";
import { blocksOf, LANES } from "../../../scripts/demo/blocks.ts";
import type { Code } from "../../../scripts/demo/code.ts";
import { demoHistory, MAIN } from "../../../scripts/demo/history/history.ts";
import type { DemoCommit } from "../../../scripts/demo/history/history.ts";
import { AUTHORS } from "../../../scripts/demo/people.ts";
import { PLANTED } from "../../../scripts/demo/planted.ts";
import type { Planted } from "../../../scripts/demo/planted.ts";
import { judgePosting } from "../../../server/ingest/judgePosting.ts";
import { DEFAULT_LIMITS } from "../../../shared/domain/limits.ts";
import { DEFAULT_TOLERANCES } from "../../../shared/domain/tolerances.ts";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { nextTest } from "../../../shared/history/nextTest.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import type { Test, TracedBreak } from "../../../shared/history/types.ts";
import { commit as commitSchema } from "../../../shared/schemas/commit.ts";
import type { Signature } from "../../../shared/schemas/break.ts";

const NOW = Date.UTC(2026, 5, 1, 12);
const history = demoHistory(NOW);
const placeOf = new Map(history.map(({ commit }, at) => [commit.sha, at]));
const guiltyOf = ({ key }: Planted): DemoCommit => history.find((one) => one.plants === key)!;
const firstParent = ({ commit }: DemoCommit): DemoCommit => history[placeOf.get(commit.parents![0]!)!]!;

interface Found {
  /** Models with entries that disagree or are invalid. */
  readonly broken: ReadonlySet<string>;
  readonly signatures: readonly { readonly model: string; readonly code: string }[];
}

/** By code base: many commits change nothing that is evaluated. */
const judged = new Map<string, Found>();

/** What the server's own judge finds in a commit's blocks, in the lane that is built most. */
function judge(code: Code): Found {
  const key = JSON.stringify(code);
  const known = judged.get(key);
  if (known) return known;
  const document = {
    format: "clinograph.build/1",
    commit: { sha: "0".repeat(40) },
    run: { id: "judged by a test" },
    blocks: blocksOf(code, "gcc-release"),
  };
  const body = new TextEncoder().encode(JSON.stringify(document));
  const { blocks } = judgePosting({
    body,
    encoding: "identity",
    limits: DEFAULT_LIMITS,
    tolerances: DEFAULT_TOLERANCES,
  });
  const found: Found = {
    broken: new Set(
      blocks.flatMap(({ model, snapshot }) => (snapshot.counts.disagrees + snapshot.counts.invalid > 0 ? [model] : [])),
    ),
    signatures: blocks.flatMap(({ model, details }) =>
      (JSON.parse(details) as { signatures: Signature[] }).signatures.map(({ code: word }) => ({ model, code: word })),
    ),
  };
  judged.set(key, found);
  return found;
}

describe("the demo's history", () => {
  it("is a graph in order: parents first, one root, every hash once, dates that rise to now", () => {
    expect(history.length).toBeGreaterThan(70);
    expect(placeOf.size).toBe(history.length);
    history.forEach(({ commit }, at) => {
      expect(commitSchema.safeParse(commit).success).toBe(true);
      expect(commit.parents!.length > 0).toBe(at > 0);
      for (const parent of commit.parents!) expect(placeOf.get(parent)).toBeLessThan(at);
      if (at > 0) expect(commit.committedAt > history[at - 1]!.commit.committedAt).toBe(true);
    });
    const last = Date.parse(history.at(-1)!.commit.committedAt);
    expect(last).toBeLessThan(NOW);
    expect(NOW - last).toBeLessThan(24 * 60 * 60 * 1000);
  });

  it("has branches that are merged, and ends on the default branch", () => {
    const merges = history.filter(({ commit }) => commit.parents!.length === 2);
    expect(merges.length).toBeGreaterThanOrEqual(2);
    for (const merge of merges) {
      const [onto, merged] = merge.commit.parents!.map((sha) => history[placeOf.get(sha)!]!.commit.branch);
      expect(onto).toBe(MAIN);
      expect(merged).not.toBe(MAIN);
    }
    expect(history.at(-1)!.commit.branch).toBe(MAIN);
  });

  it("is the same at every run but for its dates", () => {
    const later = demoHistory(NOW + 1e9);
    const undated = (list: readonly DemoCommit[]) =>
      list.map(({ commit, ...rest }) => ({ ...rest, commit: { ...commit, committedAt: "" } }));
    expect(undated(later)).toEqual(undated(history));
    expect(blocksOf(history[0]!.code, "clang-arm")).toEqual(blocksOf(later[0]!.code, "clang-arm"));
  });

  it("is written by people at addresses that nobody has", () => {
    for (const { email } of Object.values(AUTHORS)) expect(email).toMatch(/@([a-z]+\.)*example\.org$/);
  });

  it("leaves commits unbuilt, and one lane silent from a planted commit on", () => {
    expect(history.filter(({ lanes }) => lanes.length === 0).length).toBeGreaterThan(5);
    const silence = history.findIndex(({ plants }) => plants === "silent-lane");
    const [loud, silent] = LANES;
    expect(history.slice(silence).some(({ lanes }) => lanes.includes(silent))).toBe(false);
    expect(history.slice(0, silence).filter(({ lanes }) => lanes.includes(silent)).length).toBeGreaterThan(10);
    expect(history.slice(silence).filter(({ lanes }) => lanes.includes(loud)).length).toBeGreaterThan(10);
  });
});

const breaks = PLANTED.filter(({ told }) => told === "break");

describe("the planted mistakes", { timeout: 120_000 }, () => {
  it("are each made by one commit", () => {
    const planted = history.flatMap(({ plants }) => (plants === null ? [] : [plants]));
    expect([...planted].sort()).toEqual(PLANTED.map(({ key }) => key).sort());
  });

  it.each(breaks)("$what: $model breaks at that commit, as the server judges, and nothing else does", (planted) => {
    const guilty = guiltyOf(planted);
    const before = judge(firstParent(guilty).code).broken;
    const after = judge(guilty.code).broken;
    expect([...after].filter((model) => !before.has(model))).toEqual([planted.model]);
  });

  it.each(PLANTED.filter(({ told }) => told === "reference"))(
    "$what: the reference tells, nothing breaks",
    (planted) => {
      const guilty = guiltyOf(planted);
      const before = judge(firstParent(guilty).code);
      const after = judge(guilty.code);
      expect(before.signatures).toEqual([]);
      expect(after.signatures).toEqual([{ model: planted.model, code: "reference-dropped-imaginary" }]);
      expect(after.broken).toEqual(before.broken);
    },
  );

  it.each(breaks)("$what: the guilty commit is among the suspects, and next tests single it out", (planted) => {
    const guilty = guiltyOf(planted).commit.sha;
    const graph = CommitGraph.from(
      history.map(({ commit }) => ({
        sha: commit.sha,
        parents: commit.parents!,
        committedAt: Date.parse(commit.committedAt),
      })),
    );
    const testOf = (one: DemoCommit): Test => (judge(one.code).broken.has(planted.model) ? "bad" : "good");
    const built = history.filter(({ lanes }) => lanes.includes("gcc-release"));
    const tests = new Map(built.map((one) => [one.commit.sha, testOf(one)]));
    const ofGuilty = () => traceEntries(graph, tests).find(({ suspects }) => suspects.includes(guilty));
    const first = ofGuilty();
    expect(first).toBeDefined();
    let found = first as TracedBreak;
    for (;;) {
      const next = nextTest(graph, found.suspects, { tested: tests, goodElsewhere: [] });
      if (next === null) break;
      tests.set(next.commit, testOf(history[placeOf.get(next.commit)!]!));
      found = ofGuilty() as TracedBreak;
    }
    expect(found.suspects).toEqual([guilty]);
  });

  it("leave two or three models broken at the end, and repair the others", () => {
    const open = judge(history.at(-1)!.code).broken;
    expect(open.size).toBeGreaterThanOrEqual(2);
    expect(open.size).toBeLessThanOrEqual(3);
    const spoilt = new Set(breaks.map(({ model }) => model));
    expect([...spoilt].filter((model) => !open.has(model)).length).toBeGreaterThanOrEqual(3);
  });
});
