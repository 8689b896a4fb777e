import { nameSignatures } from "../../shared/numerics/signatures/nameSignatures.ts";
import type { SideNames } from "../../shared/numerics/signatures/types.ts";
import type { BlockNumbers, JudgedBlock, ReferenceFinding } from "../../shared/numerics/types.ts";
import type { Signature } from "../../shared/schemas/break.ts";
import type { SkeletonBlock } from "./skeleton.ts";

/** What the disagreeing entries of a block look like, then what its references told of themselves. */
export function signaturesOf(block: SkeletonBlock, numbers: BlockNumbers, judged: JudgedBlock): Signature[] {
  const names = { output: sideNames(block.output), input: sideNames(block.input) };
  const ofDerivative = nameSignatures(numbers, judged, names).map((named) => ({
    ...named,
    alternatives: [...named.alternatives],
  }));
  return [...ofDerivative, ...judged.best.findings.map((finding) => ofReference(finding, numbers, judged))];
}

function sideNames({ name, unit, elements }: SkeletonBlock["output"]): SideNames {
  return { name, unit: unit ?? null, elements: elements ?? null };
}

function ofReference(finding: ReferenceFinding, numbers: BlockNumbers, judged: JudgedBlock): Signature {
  return {
    code: finding.code,
    scope: "block",
    row: null,
    column: null,
    share: finding.entries / Math.max(1, judged.counts.entries),
    detail: FINDING_SENTENCE[finding.code](finding.entries, methodOf(numbers, finding.reference)),
    alternatives: [],
  };
}

function methodOf(numbers: BlockNumbers, index: number | null): string {
  return index === null ? "The references" : `The ${numbers.references[index].method} reference`;
}

const entries = (count: number) => (count === 1 ? "one entry" : `${count} entries`);

const FINDING_SENTENCE: Record<ReferenceFinding["code"], (count: number, method: string) => string> = {
  "reference-dropped-imaginary": (n, m) =>
    `${m} is exactly 0 in ${entries(n)} where a difference is not: the code under it lost the imaginary part.`,
  "reference-saw-no-change": (n, m) =>
    `${m} saw no change at all in ${entries(n)} where another reference did: its step is too small.`,
  "reference-cancelled": (n, m) => `${m} is still on its rounding branch in ${entries(n)}: its steps are too small.`,
  "reference-truncated": (n, m) => `${m} is still on its truncation branch in ${entries(n)}: its steps are too large.`,
  "references-conflict": (n, m) => `${m} differ by more than their uncertainties in ${entries(n)}.`,
  "reference-not-finite": (n, m) => `${m} is not a finite number in ${entries(n)}.`,
};
