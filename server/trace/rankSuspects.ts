import { containedInGood } from "../../shared/history/containedInGood.ts";
import { goodElsewhere } from "../../shared/history/goodElsewhere.ts";
import { nextTest } from "../../shared/history/nextTest.ts";
import { scoreSuspects } from "../../shared/history/scoreSuspects.ts";
import type { SuspectFacts } from "../../shared/history/types.ts";
import type { CommitFacts } from "../record/commitFacts.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import type { BreakDescription } from "./describeBreak.ts";
import type { StoredTrace } from "./storedTrace.ts";
import type { LaneBreak } from "./traceLane.ts";

/** Scores a break's suspects, with reasons, and picks the commit worth building next. */
export function rankSuspects(
  { graph }: ProjectGraph,
  found: LaneBreak,
  description: BreakDescription,
  commits: ReadonlyMap<string, CommitFacts>,
  built: { has(sha: string): boolean },
): StoredTrace {
  const elsewhere = goodElsewhere(graph, found.onset, found.tests);
  const inGood = containedInGood(graph, found.suspects, elsewhere);
  const facts = found.suspects.map((sha): SuspectFacts => {
    const commit = commits.get(sha);
    return {
      sha,
      changedPaths: commit?.changedPaths ?? null,
      author: commit?.author ?? null,
      isOnset: sha === found.onset,
      containedInGood: inGood.has(sha),
    };
  });
  const { models, sources, motion } = description;
  return {
    suspects: scoreSuspects(facts, { models, sources, motion }),
    nextTest: nextTest(graph, found.suspects, { tested: built, goodElsewhere: elsewhere }),
    fixedBetween: found.fixedBetween,
    historyIncomplete: found.historyIncomplete,
    sources,
    bad: found.bad,
  };
}
