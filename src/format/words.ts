import type { Counts, ProbeCounts } from "../../shared/schemas/build.ts";
import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import type {
  Motion,
  ReferenceMethod,
  SignatureCode,
  SignatureScope,
  Verdict,
} from "../../shared/domain/vocabulary.ts";
import type { Signature } from "../../shared/schemas/break.ts";
import { countOf, countText, percentText } from "./number.ts";

export const shortSha = (sha: string) => sha.slice(0, 7);

/** Verdicts from loudest to quietest: the order in which a person wants to hear of them. */
export const VERDICTS_LOUDEST_FIRST: readonly Verdict[] = [
  "invalid",
  "disagrees",
  "unresolved",
  "unreferenced",
  "agrees",
];

const PLURAL: Record<Verdict, string> = {
  agrees: "agree",
  disagrees: "disagree",
  unresolved: "unresolved",
  unreferenced: "unreferenced",
  invalid: "invalid",
};

export interface VerdictCount {
  readonly verdict: Verdict;
  readonly text: string;
}
/** What a set of entries, and of probes, comes to, loudest first: `3 disagree`, `1 probe disagrees`, `all agree`. */
export function verdictCounts(counts: Counts & { readonly probes?: ProbeCounts | undefined }): VerdictCount[] {
  const allAgree = counts.entries > 0 && counts.agrees === counts.entries;
  return VERDICTS_LOUDEST_FIRST.flatMap((verdict) => {
    const number = counts[verdict];
    const text = allAgree ? "all agree" : `${countText(number)} ${number === 1 ? verdict : PLURAL[verdict]}`;
    const probed = verdict === "unreferenced" ? 0 : (counts.probes?.[verdict] ?? 0);
    // Probes that agree are told only where there is nothing else.
    const loud = probed > 0 && (verdict !== "agrees" || counts.entries === 0);
    const ofProbes = { verdict, text: `${countOf(probed, "probe")} ${probed === 1 ? verdict : PLURAL[verdict]}` };
    return [...(number > 0 ? [{ verdict, text }] : []), ...(loud ? [ofProbes] : [])];
  });
}

export const VERDICT_MEANING: Record<Verdict, string> = {
  agrees: "The derivative is within tolerance of its reference, uncertainty included.",
  disagrees: "The derivative is out of tolerance even if the reference is off by its full uncertainty.",
  unresolved: "The reference cannot tell at this tolerance.",
  unreferenced: "No reference was posted for this entry.",
  invalid: "The derivative is not a finite number.",
};

/** Word in a table cell, and the sentence on a page. */
export const MOTION_WORD: Record<Motion, string> = {
  still: "still",
  together: "moved together",
  "derivative-only": "derivative alone",
  "model-only": "model alone",
  apart: "moved apart",
};
export const MOTION_SENTENCE: Record<Motion, string> = {
  still: "Neither the derivative nor the reference moved: the code stands where it stood at the build before.",
  together: "Derivative and reference moved together: the model changed and its derivative followed.",
  "derivative-only":
    "The derivative moved alone. The reference stands where it stood, so the model was not touched: its derivative was.",
  "model-only":
    "The model moved and its derivative was left behind: the reference changed, the derivative kept its old value.",
  apart:
    "Derivative and reference both moved, but not to the same place: the model changed and its derivative went wrong.",
};

/** The loudest motion of a block or model, as its one word. */
function loudestMotion(motion: Readonly<Record<Motion, number>> | null): Motion | null {
  if (motion === null) return null;
  const order: readonly Motion[] = ["apart", "model-only", "derivative-only", "together", "still"];
  return order.find((m) => motion[m] > 0) ?? null;
}

/** The loudest motion of a block's entries in a table's cell; null: nothing to compare with. */
export function motionWord(motion: Parameters<typeof loudestMotion>[0]): string {
  const loudest = loudestMotion(motion);
  return loudest ? MOTION_WORD[loudest] : "first build";
}

export const METHOD_WORD: Record<ReferenceMethod | "mixed", string> = {
  "forward-difference": "forward difference",
  "backward-difference": "backward difference",
  "central-difference": "central difference",
  "complex-step": "complex step",
  analytic: "analytic",
  "ad-forward": "AD, forward mode",
  "ad-reverse": "AD, reverse mode",
  "high-precision": "high precision",
  mixed: "mixed",
};

export const SIGNATURE_WORD: Record<SignatureCode, string> = {
  "sign-flipped": "sign flipped",
  "unit-factor": "wrong by a unit factor",
  scaled: "wrong by a factor",
  transposed: "transposed",
  "storage-order": "read in the other storage order",
  "rows-reordered": "rows in another order",
  "columns-reordered": "columns in another order",
  "term-missing": "a term is missing",
  "spurious-term": "a term too many",
  "single-precision": "single precision on the way",
  "left-behind": "left behind by a model change",
  "uneven-solve": "an inner solve stopped early",
  "not-finite": "not a finite number",
  "reference-dropped-imaginary": "the reference lost its imaginary part",
  "reference-saw-no-change": "the reference saw no change",
  "reference-cancelled": "the reference is still cancelling",
  "reference-truncated": "the reference is still truncating",
  "references-conflict": "the references conflict",
  "reference-not-finite": "the reference is not finite",
};

const SCOPE_WORD: Record<Exclude<SignatureScope, "entry">, string> = {
  block: "in the block",
  row: "in that row",
  column: "in that column",
};

/** `explains 90 % of what disagrees in that row`. */
export function signatureShare({ code, scope, share }: Pick<Signature, "code" | "scope" | "share">): string {
  if (code.startsWith("reference")) return `is seen in ${percentText(share)} of the entries`;
  if (scope === "entry") return "explains that entry";
  return `explains ${percentText(share)} of what disagrees ${SCOPE_WORD[scope]}`;
}

/** A break's sentence away from its commit: without the `here` that the overview of that commit says. */
export const elsewhere = (sentence: string) => sentence.replace(/ here\.$/, ".");

/** `1` of a byte plane as its word; 255 is none. */
export const verdictOfCode = (code: number): Verdict | null => VERDICTS[code] ?? null;

/** Name of row or column `index` of a block's side: its element's own name, else the side's with a number. */
export function elementName(side: { name: string; size: number; elements: string[] | null }, index: number): string {
  return side.elements?.[index] ?? (side.size === 1 ? side.name : `${side.name}[${index}]`);
}
