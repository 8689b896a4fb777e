import { ASSUMED_COMPLEX_STEP } from "../reference/absoluteSteps.ts";
import type { Scheme } from "../reference/scheme.ts";
import {
  COMPLEX_PRECISIONS,
  COMPLEX_SAFETY,
  NOISE_SAFETY,
  TRUNCATION_SAFETY,
  truncationShare,
} from "../reference/stepModel.ts";
import { DEFAULT_PRECISION, UNIT_ROUNDOFF } from "../roundoff.ts";
import type { StepCurve } from "./types.ts";

/** Safety factors on the two parts of an uncertainty. */
export interface Guards {
  readonly truncation: number;
  readonly rounding: number;
}

/** Those of `stepModel`. */
export const MODEL_GUARDS: Guards = { truncation: TRUNCATION_SAFETY, rounding: NOISE_SAFETY };

/** Medians over the rows of a column, each relative to max(|r|, floor). */
export interface ColumnFacts {
  /** S, and S as the complex step sees it. */
  readonly curvature: number;
  readonly complexCurvature: number;
  /** N and |r|. */
  readonly noise: number;
  readonly magnitude: number;
}

/**
 * The modelled branches of a column under a method.
 *
 * Formula: differences U(h) = g_t S share(h) + g_r ((c N + u |x| |r|)/h + 4u |r|), g the guards; complex step
 * U(h) = S (8 max(eta, 2u) + 2 share(h)). Units: `truncation` 1/step^order, `rounding` step, `floor` dimensionless.
 */
export function stepCurve(
  scheme: Scheme,
  facts: ColumnFacts,
  guards: Guards,
  precision: number,
  length: number,
  input: number,
): StepCurve {
  const ofUnit = truncationShare(scheme, 1, length);
  const { order, noisyValues } = scheme;
  if (noisyValues === 0) {
    const floor = COMPLEX_PRECISIONS * Math.max(precision, DEFAULT_PRECISION) * facts.complexCurvature;
    return { order, truncation: orInfinite(COMPLEX_SAFETY * facts.complexCurvature * ofUnit), rounding: 0, floor };
  }
  const noisy = noisyValues * facts.noise + UNIT_ROUNDOFF * input * facts.magnitude;
  return {
    order,
    truncation: orInfinite(guards.truncation * facts.curvature * ofUnit),
    rounding: guards.rounding * noisy,
    floor: guards.rounding * 4 * UNIT_ROUNDOFF * facts.magnitude,
  };
}

/** Overflow on one side and underflow on the other leave NaN, which says no more than +Infinity. */
function orInfinite(factor: number): number {
  return factor === factor ? factor : Infinity;
}

/**
 * The step that minimises truncation h^p + rounding / h: (rounding / truncation)^(1/2) for p = 1,
 * (rounding / 2 truncation)^(1/3) for p = 2; a complex step has no rounding branch and takes 1e-8 L, of which any smaller
 * one is as good.
 *
 * Units: those of the input. Domain: never more than L (beyond it nothing says what the function does) nor so little
 * that x + h is hardly more than x. NaN policy: null where the branches tell nothing.
 * Source: P. E. Gill, W. Murray, M. A. Saunders, M. H. Wright, SIAM J. Sci. Stat. Comput. 4(2):310-321, 1983,
 * doi:10.1137/0904025.
 */
export function bestStep(scheme: Scheme, curve: StepCurve, length: number, input: number): number | null {
  if (scheme.noisyValues === 0) return ASSUMED_COMPLEX_STEP * length;
  const { truncation, rounding } = curve;
  const step = scheme.order === 1 ? Math.sqrt(rounding / truncation) : Math.cbrt(rounding / truncation / 2);
  return step > 0 ? Math.min(length, Math.max(step, 4 * UNIT_ROUNDOFF * input)) : null;
}
