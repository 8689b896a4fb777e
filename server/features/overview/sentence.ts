import type { SummaryCounts } from "../../../shared/schemas/build.ts";
import { countInWords, modelsInWords } from "../breaks/sentence.ts";
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
}

/** What happened at a commit, in one sentence, the gravest thing first. */
export function overviewSentence(facts: OverviewFacts): string {
  const { commit, judged, counts, newBreaks, repairedBreaks, openBreaks, vanished } = facts;
  if (commit === null) return "Nothing was posted to this lane yet.";
  if (!judged || counts === null) return "This commit was not built in this lane.";
  if (newBreaks.length === 1) return newBreaks[0].brief.sentence;
  if (newBreaks.length > 1) return `${partialsOf(newBreaks)} stopped agreeing here.`;
  if (vanished > 0) return `${capital(countInWords(vanished))} ${vanished === 1 ? "block" : "blocks"} vanished here.`;
  if (repairedBreaks.length > 0) return `${partialsOf(repairedBreaks)} ${agreeAgain(repairedBreaks)} here.`;
  if (openBreaks.length > 0) {
    const are = openBreaks.length === 1 ? "break is" : "breaks are";
    return `Nothing broke here; ${countInWords(openBreaks.length)} earlier ${are} still open.`;
  }
  return soundSentence(counts, facts.hasBaseline);
}

function soundSentence(counts: SummaryCounts, hasBaseline: boolean): string {
  if (counts.entries === 0) return "This build has no entries.";
  const bad = counts.disagrees + counts.invalid;
  if (bad > 0)
    return `${capital(countInWords(bad))} of ${counts.entries} partials ${bad === 1 ? "disagrees" : "disagree"}.`;
  if (counts.agrees === counts.entries) {
    return hasBaseline ? `All ${counts.entries} partials still agree.` : `All ${counts.entries} partials agree.`;
  }
  const open = counts.entries - counts.agrees;
  return `Nothing disagrees; ${open} of ${counts.entries} partials could not be told.`;
}

function partialsOf(breaks: readonly BreakAt[]): string {
  const count = breaks.reduce((sum, one) => sum + one.entryCount, 0);
  const models = [...new Set(breaks.flatMap((one) => one.models))];
  return `${capital(countInWords(count))} ${count === 1 ? "partial" : "partials"} of ${modelsInWords(models)}`;
}

function agreeAgain(breaks: readonly BreakAt[]): string {
  return breaks.reduce((sum, one) => sum + one.entryCount, 0) === 1 ? "agrees again" : "agree again";
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
