import type { CommitGraph } from "./commitGraph.ts";
import { nextTest } from "./nextTest.ts";
import { scoreSuspects } from "./scoreSuspects.ts";
import type { NextTest, ScoreContext, SuspectFacts, SuspectScore } from "./types.ts";

/** How far the error rose between two builds that follow each other, in decades. */
export interface RiseStep {
  /** The later of the two. */
  readonly sha: string;
  readonly decades: number;
}

export interface RisingSuspects {
  readonly suspects: readonly SuspectScore[];
  readonly nextTest: NextTest | null;
}

/** How strongly the share of the rise at a commit's build weighs, beside what the paths say. */
const RISE_WEIGHT = 8;

/**
 * Commits that came after the last calm build, up to the one that told a rise, in no order. `calm` null: nothing before
 * is known, so every ancestor of `told` is among them.
 */
export function risingRange(
  graph: CommitGraph,
  { calm, told }: { readonly calm: string | null; readonly told: string },
): string[] {
  const cleared = calm === null ? new Set<string>() : graph.ancestors(calm);
  return [...graph.ancestors(told)].filter((sha) => !cleared.has(sha));
}

/**
 * Suspects of a climb or jump, those of `risingRange`: scored like those of a break, and by the share of the rise that
 * the build of the commit shows; commits between two builds share theirs. The next test halves the stretch between the
 * two builds with the largest rise. `steps` in commit order.
 */
export function risingSuspects(
  graph: CommitGraph,
  suspects: readonly string[],
  steps: readonly RiseStep[],
  factsOf: (sha: string) => Omit<SuspectFacts, "containedInGood">,
  context: ScoreContext,
  built: { has(sha: string): boolean },
): RisingSuspects {
  const stretches = stretchesOf(graph, suspects, steps);
  const total = steps.reduce((sum, step) => sum + Math.max(0, step.decades), 0);
  const plain = scoreSuspects(
    suspects.map((sha) => ({ ...factsOf(sha), containedInGood: false })),
    context,
  );
  const weighed = plain.map((suspect) => withRise(suspect, stretches.get(suspect.sha), total));
  const sum = weighed.reduce((all, suspect) => all + suspect.score, 0);
  const scored = weighed.map((suspect) => ({ ...suspect, score: suspect.score / sum }));
  const steepest = [...new Set(stretches.values())].sort((a, b) => b.step.decades - a.step.decades)[0];
  return {
    suspects: scored.sort((a, b) => b.score - a.score || (a.sha < b.sha ? -1 : 1)),
    nextTest: steepest ? nextTest(graph, steepest.shas, { tested: built, goodElsewhere: [] }) : null,
  };
}

interface Stretch {
  readonly step: RiseStep;
  readonly shas: string[];
}

/** By commit: the commits that share its rise, those that the first build after them brought in. */
function stretchesOf(
  graph: CommitGraph,
  suspects: readonly string[],
  steps: readonly RiseStep[],
): Map<string, Stretch> {
  const left = new Set(suspects);
  const stretches = new Map<string, Stretch>();
  for (const step of steps) {
    const within = graph.ancestors(step.sha);
    const shas = [...left].filter((sha) => within.has(sha));
    const stretch = { step, shas };
    for (const sha of shas) {
      left.delete(sha);
      stretches.set(sha, stretch);
    }
  }
  return stretches;
}

function withRise(suspect: SuspectScore, stretch: Stretch | undefined, total: number): SuspectScore {
  const decades = stretch?.step.decades ?? 0;
  if (stretch === undefined || decades < 0.05 || total <= 0) return suspect;
  const share = decades / total / stretch.shas.length;
  const where = stretch.shas.length === 1 ? "in its build" : `over the ${stretch.shas.length} commits around it`;
  const why = `the error rose by ${decades.toFixed(1)} ${decades.toFixed(1) === "1.0" ? "decade" : "decades"} ${where}`;
  return { sha: suspect.sha, score: suspect.score * (1 + RISE_WEIGHT * share), why: [why, ...suspect.why] };
}
