import type { ReferenceMethod } from "../../domain/vocabulary.ts";
import type { Scheme } from "../reference/scheme.ts";
import { CENTRAL, COMPLEX, ONE_SIDED } from "../reference/scheme.ts";
import { truncationFactor, truncationShare } from "../reference/stepModel.ts";
import { UNIT_ROUNDOFF } from "../roundoff.ts";
import type { ColumnFacts, Guards } from "./bestStep.ts";
import { bestStep, stepCurve } from "./bestStep.ts";
import type { ColumnScratch } from "./columnScratch.ts";
import { gather, pooled, relativeTo } from "./pool.ts";
import type { StepCandidate } from "./types.ts";

/** What is the same for all entries of a column. */
export interface ColumnSetting {
  readonly method: ReferenceMethod;
  readonly scheme: Scheme;
  readonly guards: Guards;
  readonly precision: number;
  readonly length: number;
  readonly input: number;
  readonly rtol: number;
}

const OTHERS = [
  ["forward-difference", ONE_SIDED],
  ["central-difference", CENTRAL],
  ["complex-step", COMPLEX],
] as const;

/**
 * What one-sided differences, central differences and a complex step would give at their best steps, the column's own
 * method first, over its `living` entries; `quiet` ones are resolved by any.
 */
export function columnCandidates(
  setting: ColumnSetting,
  facts: ColumnFacts,
  scratch: ColumnScratch,
  living: number,
  quiet: number,
): StepCandidate[] {
  const others = OTHERS.filter(([, scheme]) => scheme !== setting.scheme);
  const methods = [[setting.method, setting.scheme] as const, ...others];
  return methods.map(([method, scheme]) => {
    const curve = stepCurve(scheme, facts, setting.guards, setting.precision, setting.length, setting.input);
    const step = living === 0 ? null : bestStep(scheme, curve, setting.length, setting.input);
    if (step === null) return { method, step, resolution: null, resolved: quiet };
    return { method, step, ...predict(setting, scheme, step, scratch, living, quiet) };
  });
}

function predict(
  { guards, precision, length, input, rtol }: ColumnSetting,
  scheme: Scheme,
  step: number,
  scratch: ColumnScratch,
  living: number,
  quiet: number,
): Pick<StepCandidate, "resolution" | "resolved"> {
  const { curvature, complexCurvature, noise, magnitude, size, spare } = scratch;
  const complex = scheme.noisyValues === 0;
  const share = complex
    ? truncationFactor(scheme, step, precision, length)
    : guards.truncation * truncationShare(scheme, step, length);
  const ofNoise = complex ? 0 : guards.rounding * (scheme.noisyValues / step);
  const ofMagnitude = complex ? 0 : guards.rounding * UNIT_ROUNDOFF * (input / step + 4);
  let resolved = quiet;
  spare.count = 0;
  for (let k = 0; k < living; k += 1) {
    const s = complex ? complexCurvature[k] : curvature[k];
    const relative = relativeTo(size[k], s * share + noise[k] * ofNoise + magnitude[k] * ofMagnitude);
    if (relative <= rtol) resolved += 1;
    gather(spare, relative);
  }
  return { resolution: pooled(spare), resolved };
}
