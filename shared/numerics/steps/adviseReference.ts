import type { ReferenceMethod } from "../../domain/vocabulary.ts";
import { isDifference } from "../reference/scheme.ts";
import type { ReferenceFinding } from "../types.ts";
import { entriesOf, roughly, shareOf } from "./roughly.ts";
import type { CandidateTotal, StudyTotals } from "./studyTotals.ts";
import { studyTotals } from "./studyTotals.ts";
import type { StepStudy } from "./types.ts";

const NAME: Record<ReferenceMethod, { readonly many: string; readonly one: string }> = {
  "forward-difference": { many: "forward differences", one: "a forward step" },
  "backward-difference": { many: "backward differences", one: "a backward step" },
  "central-difference": { many: "central differences", one: "a central step" },
  "complex-step": { many: "complex steps", one: "a complex step" },
  analytic: { many: "the analytic reference", one: "an analytic reference" },
  "ad-forward": { many: "the forward AD reference", one: "a forward AD reference" },
  "ad-reverse": { many: "the reverse AD reference", one: "a reverse AD reference" },
  "high-precision": { many: "the high-precision reference", one: "a high-precision reference" },
};

/** Another method must resolve so much more than the reference's own best step to be worth its trouble. */
const WORTH_CHANGING = 1.02;

/** What the block's references said of themselves; `reference` null or not known counts for all of a method's kind. */
export type Told = Pick<ReferenceFinding, "code" | "entries">;

/**
 * What to do about a reference, in sentences, the most important first. Where it resolves everything that is said, and
 * nothing else. Numbers are rounded to one digit: a step is good or bad by factors, not by per cent.
 *
 * Domain: any study; `findings` of the whole block. Throws: never. Cost: one pass over the columns.
 */
export function adviseReference(study: StepStudy, findings: readonly Told[] = []): string[] {
  const totals = studyTotals(study);
  const of = { study, totals };
  const dropped = droppedIn(study.method, findings);
  if (dropped === 0) return [...resolution(of), ...branches(of), ...trouble(study.method, findings)];
  const [first, ...rest] = resolution(of);
  const elsewhere = `Elsewhere ${first.charAt(0).toLowerCase()}${first.slice(1)}`;
  return [lostImaginary(dropped), elsewhere, ...rest, ...branches(of), ...trouble(study.method, findings)];
}

/** Entries that a complex step lost its imaginary part in. */
function droppedIn(method: ReferenceMethod, findings: readonly Told[]): number {
  return method === "complex-step" ? countOf("reference-dropped-imaginary", findings) : 0;
}

function lostImaginary(entries: number): string {
  return `The complex step lost its imaginary part in ${entriesOf(entries)}: an absolute value, a comparison or a call for real numbers swallowed it there; until it is mended these entries need a difference.`;
}

function countOf(code: Told["code"], findings: readonly Told[]): number {
  return findings.reduce((sum, finding) => sum + (finding.code === code ? finding.entries : 0), 0);
}

interface Advised {
  readonly study: StepStudy;
  readonly totals: StudyTotals;
}

function resolution({ study, totals }: Advised): string[] {
  const { entries, resolved, candidates } = totals;
  const who = capital(`${NAME[study.method].many}${at(totals)}`);
  const rtol = roughly(study.rtol);
  if (entries === 0) return [`${capital(NAME[study.method].many)} gave no value in these columns.`];
  const verb = candidates.length === 0 ? "resolves" : "resolve";
  if (resolved >= entries) return [`${who} ${verb} every entry at ${rtol}.`];
  const seen =
    resolved === 0
      ? `${who} cannot see ${rtol} here`
      : `${who} ${verb} ${shareOf(resolved, entries)} at ${rtol}, not the other ${entriesOf(entries - resolved)}`;
  const better = bestOf(totals);
  if (better === null) return [`${seen}; ${noBetter(study, totals)}.`];
  const condition =
    better.method === "complex-step" && study.method !== "complex-step" ? ", if the code takes complex numbers" : "";
  return [`${seen}; ${stepText(better)} would resolve ${shareOf(better.resolved, entries)}${condition}.`];
}

/** The posted steps: ` at 10⁻⁸`, ` from 10⁻² to 10⁻⁵`. */
function at({ posted }: StudyTotals): string {
  if (posted === null) return "";
  const [smallest, largest] = posted;
  return roughly(smallest) === roughly(largest)
    ? ` at ${roughly(largest)}`
    : ` at steps from ${roughly(largest)} to ${roughly(smallest)}`;
}

function stepText({ method, step }: CandidateTotal): string {
  const near =
    step === null ? "" : method === "complex-step" ? ` of ${roughly(step)} or less` : ` near ${roughly(step)}`;
  return `${NAME[method].one}${near}`;
}

/** The candidate to advise: the first, own one first, that comes near the best of all; null where none is better than what is there. */
function bestOf({ candidates, resolved }: StudyTotals): CandidateTotal | null {
  const most = candidates.reduce((best, { resolved: count }) => Math.max(best, count), 0);
  const near = candidates.find((candidate) => candidate.resolved * WORTH_CHANGING >= most);
  return near === undefined || near.resolved <= resolved ? null : near;
}

function noBetter(study: StepStudy, { candidates }: StudyTotals): string {
  if (candidates.length === 0) return "what is left needs another reference or a wider tolerance";
  if (study.stated) return "the stated uncertainty is what limits them";
  return "no other step would do better: the function's own noise limits them, as an inner solve that stops early does";
}

function branches({ study, totals }: Advised): string[] {
  const { truncated, cancelled, candidates } = totals;
  const [own] = candidates;
  if (own === undefined || own.step === null || study.stated) return [];
  const near = own.method === "complex-step" ? `of ${roughly(own.step)} or less` : `near ${roughly(own.step)}`;
  const posted = study.measured ? "the sweep is" : "the step is";
  const sentences: string[] = [];
  if (truncated > 0) {
    const end = study.measured ? " still truncating at its smallest step" : " too large";
    sentences.push(`In ${entriesOf(truncated)} ${posted}${end}: take smaller ones, ${near}.`);
  }
  if (cancelled > 0) {
    const end = study.measured ? " cancelling from its largest step on" : " too small, and rounding is what it sees";
    sentences.push(`In ${entriesOf(cancelled)} ${posted}${end}: take larger ones, ${near}.`);
  }
  return sentences;
}

function trouble(method: ReferenceMethod, findings: readonly Told[]): string[] {
  const count = (code: Told["code"]) => countOf(code, findings);
  const sentences: string[] = [];
  const blind = count("reference-saw-no-change");
  if (isDifference(method) && blind > 0) {
    sentences.push(
      `In ${entriesOf(blind)} the difference saw no change where a complex step did: its step is too small.`,
    );
  }
  const conflicts = count("references-conflict");
  if (conflicts > 0) {
    sentences.push(
      `The references of this block conflict in ${entriesOf(conflicts)}, beyond both their uncertainties: one of them is wrong, or less certain than it says; look at the steps of each.`,
    );
  }
  const holes = count("reference-not-finite");
  if (holes > 0)
    sentences.push(`${capital(entriesOf(holes))} of the block's references ${holes === 1 ? "is" : "are"} not finite.`);
  return sentences;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
