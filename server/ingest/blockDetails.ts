import { createHash } from "node:crypto";
import type { Signature } from "../../shared/schemas/break.ts";
import type { BlockNumbers, JudgedBlock, ReferenceNumbers } from "../../shared/numerics/types.ts";
import type { ReferenceMethod, StepKind, UncertaintyKind } from "../../shared/domain/vocabulary.ts";
import type { ProbeDetails } from "../../shared/schemas/block.ts";
import type { Cost } from "../../shared/schemas/build.ts";
import { signaturesOf } from "./blockSignatures.ts";
import type { SkeletonBlock } from "./skeleton.ts";

/** What a block says of itself beside its numbers; stored once however often it is posted. */
export interface BlockDetails {
  readonly output: SideDetails;
  readonly input: SideDetails;
  readonly derivativeMethod: string;
  readonly references: readonly ReferenceDetails[];
  readonly signatures: readonly Signature[];
  /** What the probe came to, where the block is one. */
  readonly probe?: ProbeDetails;
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
    signatures: signaturesOf(block, numbers, judged),
    sources: block.sources,
  };
}

/** The details as they are stored. */
export function hashedDetails(told: BlockDetails): { readonly details: string; readonly detailsHash: Uint8Array } {
  const details = JSON.stringify(told);
  return { details, detailsHash: createHash("sha256").update(details).digest() };
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
