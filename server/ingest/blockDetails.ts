import type { Signature } from "../../shared/schemas/break.ts";
import type { BlockNumbers, JudgedBlock, ReferenceNumbers } from "../../shared/numerics/types.ts";
import type { ReferenceMethod, StepKind, UncertaintyKind } from "../../shared/domain/vocabulary.ts";
import type { Cost } from "../../shared/schemas/build.ts";
import type { SkeletonBlock } from "./skeleton.ts";

/** What a block says of itself beside its numbers; stored once however often it is posted. */
export interface BlockDetails {
  readonly output: SideDetails;
  readonly input: SideDetails;
  readonly derivativeMethod: string;
  readonly references: readonly ReferenceDetails[];
  readonly signatures: readonly Signature[];
  readonly probes: SkeletonBlock["probes"];
  readonly sources: readonly string[];
}
export interface SideDetails {
  readonly unit: string | null;
  readonly elements: readonly string[] | null;
}
export interface ReferenceDetails {
  readonly method: ReferenceMethod;
  readonly uncertaintyKind: UncertaintyKind;
  readonly assumed: boolean;
  readonly stepKind: StepKind;
  readonly steps: readonly number[];
  readonly precision: number | null;
  readonly columns: readonly number[] | null;
}

/** What a block cost to make: differs from run to run, so it is no part of the details. */
export interface BlockCosts {
  readonly derivative: Cost | null;
  readonly references: readonly (Cost | null)[];
}

export function detailsOf(block: SkeletonBlock, numbers: BlockNumbers, judged: JudgedBlock): BlockDetails {
  const side = ({ unit, elements }: SkeletonBlock["output"]): SideDetails => ({
    unit: unit ?? null,
    elements: elements ?? null,
  });
  return {
    output: side(block.output),
    input: side(block.input),
    derivativeMethod: block.derivative.method,
    references: numbers.references.map((reference, k) => ({
      method: reference.method,
      uncertaintyKind: judged.best.kinds[k],
      assumed: judged.best.assumed[k],
      stepKind: reference.stepKind,
      steps: largestSteps(reference),
      precision: reference.precision,
      columns: reference.columns && [...reference.columns],
    })),
    signatures: judged.best.findings.map((finding) => ({
      code: finding.code,
      share: finding.entries / Math.max(1, judged.counts.entries),
      detail: FINDING_SENTENCE[finding.code](finding.entries, methodOf(numbers, finding.reference)),
    })),
    probes: block.probes,
    sources: block.sources,
  };
}

export function costsOf(block: SkeletonBlock): BlockCosts | null {
  const derivative = block.derivative.cost ?? null;
  const references = block.references.map((reference) => reference.cost ?? null);
  return derivative === null && references.every((cost) => cost === null) ? null : { derivative, references };
}

function largestSteps(reference: ReferenceNumbers): number[] {
  return reference.steps.flatMap(({ step }) => {
    if (step === null) return [];
    return [typeof step === "number" ? step : step.reduce((a, b) => Math.max(a, b), 0)];
  });
}

function methodOf(numbers: BlockNumbers, index: number | null): string {
  return index === null ? "the references" : `the ${numbers.references[index].method} reference`;
}

const entries = (count: number) => (count === 1 ? "one entry" : `${count} entries`);

const FINDING_SENTENCE: Record<
  JudgedBlock["best"]["findings"][number]["code"],
  (count: number, method: string) => string
> = {
  "reference-dropped-imaginary": (n, m) =>
    `${m} is exactly 0 in ${entries(n)} where a difference is not: the code under it lost the imaginary part`,
  "reference-saw-no-change": (n, m) =>
    `${m} saw no change at all in ${entries(n)} where another reference did: its step is too small`,
  "reference-cancelled": (n, m) => `${m} is still on its rounding branch in ${entries(n)}: its steps are too small`,
  "reference-truncated": (n, m) => `${m} is still on its truncation branch in ${entries(n)}: its steps are too large`,
  "references-conflict": (n, m) => `${m} differ by more than their uncertainties in ${entries(n)}`,
  "reference-not-finite": (n, m) => `${m} is not a finite number in ${entries(n)}`,
};
