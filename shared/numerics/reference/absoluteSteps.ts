import type { StepKind } from "../../domain/vocabulary.ts";
import type { ReferenceStep } from "../types.ts";
import type { Geometry } from "./geometry.ts";
import type { Scheme } from "./scheme.ts";

/** Step taken for a complex step that was posted without one, relative to L: any smaller one is as good. */
export const ASSUMED_COMPLEX_STEP = 1e-8;

/**
 * Absolute step h per covered column; NaN where no usable step was posted: none, zero, not finite, or, for a
 * difference, so small that x + h is x.
 *
 * Formula: h = |step|, times max(|x|, 1) when relative. Units: those of the input.
 */
export function absoluteSteps(
  step: ReferenceStep["step"],
  kind: StepKind,
  scheme: Scheme,
  sizes: Geometry,
): Float64Array {
  const steps = new Float64Array(sizes.width);
  for (let c = 0; c < sizes.width; c += 1) {
    const x = sizes.inputs[c];
    if (step === null) {
      steps[c] = scheme.noisyValues === 0 ? ASSUMED_COMPLEX_STEP * sizes.lengths[c] : NaN;
      continue;
    }
    const posted = Math.abs(typeof step === "number" ? step : step[c]);
    const h = kind === "relative" ? posted * Math.max(x, 1) : posted;
    const lost = scheme.noisyValues > 0 && sizes.inputsKnown && x + h === x;
    steps[c] = h > 0 && h < Infinity && !lost ? h : NaN;
  }
  return steps;
}
