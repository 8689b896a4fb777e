import { looksLikeDerivative } from "./looksLikeDerivative.ts";
import { pathClue } from "./pathClue.ts";
import type { PathClue } from "./pathClue.ts";
import type { ScoreContext, SuspectFacts, SuspectScore } from "./types.ts";

/** Odds that facts other than paths lend: chosen, not measured; only the order that they make counts. */
const ODDS = {
  derivativeFileAndDerivativeMoved: 4,
  derivativeFileAndModelMoved: 0.5,
  modelFileAndModelMoved: 2,
  nothingConnected: 0.3,
  onlyProse: 0.05,
  onset: 1.5,
  owner: 1.3,
  containedInGood: 0.25,
} as const;

const PROSE = /(?:\.(?:md|rst|adoc|pdf|png|svg)|(?:^|\/)(?:licen[cs]e|authors|changelog|\.gitignore))$/i;

/**
 * Orders suspects, most likely first, with reasons in words; scores are in 0..1 and sum to 1 over the suspects (equal
 * ones by sha). Each fact multiplies a suspect's odds: changed paths against the models' sources and names, the motion
 * of the entries (where the derivative alone moved, derivative code is looked for; where the model alone moved, model
 * code), the size of the change, being the onset, being held by a good build on another line. It orders work and
 * clears nobody. No published model: the weights are ours.
 */
export function scoreSuspects(facts: readonly SuspectFacts[], context: ScoreContext): SuspectScore[] {
  const weighed = facts.map((suspect) => {
    const clues = cluesFor(suspect, context);
    return {
      sha: suspect.sha,
      odds: clues.reduce((product, clue) => product * clue.odds, 1),
      why: clues
        .filter((clue) => clue.why !== "")
        .sort((a, b) => Math.abs(Math.log(b.odds)) - Math.abs(Math.log(a.odds)))
        .map((clue) => clue.why),
    };
  });
  const total = weighed.reduce((sum, suspect) => sum + suspect.odds, 0);
  return weighed
    .sort((a, b) => b.odds - a.odds || (a.sha < b.sha ? -1 : 1))
    .map(({ sha, odds, why }) => ({ sha, score: odds / total, why }));
}

function cluesFor(suspect: SuspectFacts, context: ScoreContext): PathClue[] {
  const clues = suspect.changedPaths === null ? [] : pathClues(suspect.changedPaths, context);
  if (suspect.isOnset) clues.push({ odds: ODDS.onset, why: "the first build that was bad is of this commit" });
  if (suspect.author !== null && context.owners?.includes(suspect.author)) {
    clues.push({ odds: ODDS.owner, why: `by ${suspect.author}, who owns ${context.models.join(", ")}` });
  }
  if (suspect.containedInGood) {
    clues.push({ odds: ODDS.containedInGood, why: "a good build on another line contains it" });
  }
  if (suspect.changedPaths === null) clues.push({ odds: 1, why: "what it changes is not known" });
  return clues;
}

function pathClues(paths: readonly string[], context: ScoreContext): PathClue[] {
  const size = paths.length === 1 ? "one file" : `${paths.length} files`;
  if (paths.length === 0) return [{ odds: ODDS.nothingConnected, why: "changes no file" }];
  if (paths.every((path) => PROSE.test(path))) {
    return [{ odds: ODDS.onlyProse, why: `changes ${size}, all of them text or pictures` }];
  }
  const found = paths
    .map((path) => ({ path, clue: pathClue(path, context) }))
    .filter((one): one is { path: string; clue: PathClue } => one.clue !== null)
    .sort((a, b) => b.clue.odds - a.clue.odds || (a.path < b.path ? -1 : 1));
  const clues = found[0] ? [found[0].clue] : [{ odds: ODDS.nothingConnected, why: nothingConnected(context) }];
  const second = found[1];
  // More of the same kind adds little; it is told, so that a reader sees where to look.
  if (second) clues.push({ odds: 1 + Math.log10(found.length) / 2, why: second.clue.why });
  const connected = found.map((one) => one.path);
  clues.push(...motionClues(connected.length > 0 ? connected : paths, connected.length > 0, context));
  // A large change has more room for a mistake, whatever it touches.
  clues.push({ odds: 1 + Math.log10(paths.length) / 4, why: paths.length >= 10 ? `changes ${size}` : "" });
  return clues;
}

function nothingConnected(context: ScoreContext): string {
  return `changes no file connected with ${context.models.join(", ") || "the model"}`;
}

function motionClues(paths: readonly string[], connected: boolean, context: ScoreContext): PathClue[] {
  const derivative = paths.find(looksLikeDerivative);
  if (context.motion === "derivative-only" && derivative !== undefined) {
    const why = `only the derivative moved, and ${derivative} looks like derivative code`;
    return [{ odds: ODDS.derivativeFileAndDerivativeMoved, why }];
  }
  if (context.motion !== "model-only") return [];
  const model = paths.find((path) => !looksLikeDerivative(path) && !PROSE.test(path));
  if (model === undefined) {
    const why = "only the model moved, and this changes derivative code alone";
    return [{ odds: ODDS.derivativeFileAndModelMoved, why }];
  }
  if (!connected || derivative !== undefined) return [];
  return [{ odds: ODDS.modelFileAndModelMoved, why: `only the model moved, and ${model} looks like model code` }];
}
