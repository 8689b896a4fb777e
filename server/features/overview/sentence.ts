import type { SummaryCounts } from "../../../shared/schemas/build.ts";
import { countedParts, countInWords, modelsInWords } from "../breaks/sentence.ts";
import type { BreakAt } from "./breaksAt.ts";

export interface OverviewFacts {
  readonly commit: string | null;
  readonly judged: boolean;
  readonly counts: SummaryCounts | null;
  readonly newBreaks: readonly BreakAt[];
  readonly repairedBreaks: readonly BreakAt[];
  readonly openBreaks: readonly BreakAt[];
  readonly vanished: number;
  readonly hasBaseline: boolean;
  /** Climbs and jumps that were told at this commit. */
  readonly newClimbs: readonly { readonly sentence: string }[];
}

/** What happened at a commit, in one sentence, the gravest thing first. */
export function overviewSentence(facts: OverviewFacts): string {
  const { commit, judged, counts, newBreaks, repairedBreaks, openBreaks, vanished } = facts;
  if (commit === null) return "Nothing was posted to this lane yet.";
  if (!judged || counts === null) return "This commit was not built in this lane.";
  if (newBreaks.length === 1) return newBreaks[0].brief.sentence;
  if (newBreaks.length > 1) return `${partialsOf(newBreaks)} stopped agreeing here.`;
  if (vanished > 0) return `${capital(countInWords(vanished))} ${vanished === 1 ? "block" : "blocks"} vanished here.`;
  if (facts.newClimbs.length > 0) return facts.newClimbs[0].sentence;
  if (repairedBreaks.length > 0) return `${partialsOf(repairedBreaks)} ${agreeAgain(repairedBreaks)} here.`;
  if (openBreaks.length > 0) {
    const are = openBreaks.length === 1 ? "break is" : "breaks are";
    return `Nothing broke here; ${countInWords(openBreaks.length)} earlier ${are} still open.`;
  }
  return soundSentence(counts, facts.hasBaseline);
}

function soundSentence(counts: SummaryCounts, hasBaseline: boolean): string {
  const told = probesSentence(counts.probes);
  if (counts.entries === 0) return told === null ? "This build has no entries." : `${capital(told)}.`;
  const failed = counts.probes.disagrees + counts.probes.invalid > 0;
  return `${entriesSentence(counts, hasBaseline)}${failed && told !== null ? `; ${told}` : ""}.`;
}

function entriesSentence(counts: SummaryCounts, hasBaseline: boolean): string {
  const bad = counts.disagrees + counts.invalid;
  if (bad > 0)
    return `${capital(countInWords(bad))} of ${counts.entries} partials ${bad === 1 ? "disagrees" : "disagree"}`;
  if (counts.agrees === counts.entries) {
    return hasBaseline ? `All ${counts.entries} partials still agree` : `All ${counts.entries} partials agree`;
  }
  const open = counts.entries - counts.agrees;
  return `Nothing disagrees; ${open} of ${counts.entries} partials could not be told`;
}

/** Null where there is no probe. */
function probesSentence({ agrees, disagrees, unresolved, invalid }: SummaryCounts["probes"]): string | null {
  const all = agrees + disagrees + unresolved + invalid;
  if (all === 0) return null;
  const failed = disagrees + invalid;
  if (failed > 0) return `${countInWords(failed)} ${failed === 1 ? "probe disagrees" : "probes disagree"}`;
  if (unresolved > 0) return `${countInWords(unresolved)} of ${countInWords(all)} probes could not be told`;
  return all === 1 ? "one probe agrees" : `all ${countInWords(all)} probes agree`;
}

/** What the breaks are made of, added up. */
function allOf(breaks: readonly BreakAt[]): Pick<BreakAt, "partials" | "probes"> {
  return {
    partials: breaks.reduce((sum, one) => sum + one.partials, 0),
    probes: breaks.flatMap((one) => one.probes),
  };
}

function partialsOf(breaks: readonly BreakAt[]): string {
  const models = [...new Set(breaks.flatMap((one) => one.models))];
  return `${capital(countedParts(allOf(breaks)))} of ${modelsInWords(models)}`;
}

function agreeAgain(breaks: readonly BreakAt[]): string {
  const { partials, probes } = allOf(breaks);
  return partials + probes.length === 1 ? "agrees again" : "agree again";
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
