import { decideProbe } from "./decideProbe.ts";
import { extrapolateRemainders } from "./extrapolateRemainders.ts";
import type { Extrapolated } from "./extrapolateRemainders.ts";
import { logSlope } from "./logSlope.ts";
import { surveyRemainders } from "./surveyRemainders.ts";
import type { Remainders } from "./surveyRemainders.ts";
import { shown } from "./shown.ts";
import type { JudgedTaylorProbe, TaylorProbe } from "./types.ts";

/** An uncertainty that rests on an assumed |f| accuses only beyond so many times itself. */
const ASSUMED_GUARD = 10;
/** Without the size of g.d: slope of the three smallest usable steps up to which the gradient is wrong, or right from. */
const WRONG_SLOPE = 1.3;
const RIGHT_SLOPE = 1.9;
/** Ratio of the largest to the smallest usable step from which a slope may acquit. */
const ACQUITTING_SPAN = 100;

/**
 * Is the gradient right along a line? The Taylor remainder R(h) = |f(x + h d) - f(x) - h g.d| is about
 * |alpha h + beta h^2|, alpha the error of the directional derivative g.d.
 *
 * Formula: alpha and U as in `extrapolateRemainders`. With `scale` S = |g.d|: T = rtol S; `agrees` if |alpha| + U <= T,
 * `disagrees` if |alpha| - g U > T, else `unresolved`; g = 10 where |f| had to be assumed, else 1. The slope of log R
 * against log h is told beside it and decides nothing: a gradient wrong by 1 % still shows 1.96 at large steps.
 * Without `scale` the slope of the three smallest usable steps has to do: `disagrees` up to 1.3 where alpha is beyond
 * g U as well; `agrees` from 1.9 where the usable steps span a factor of 100 or more, so that an error of 1 % would
 * have shown as long as the largest step is not beyond the line's curvature; else `unresolved`. Where all remainders
 * are within the rounding floor, f is linear as far as can be seen: `agrees` if |alpha| + U <= rtol S, S without `scale`
 * being |f|, else the steps were too small to tell (`unresolved`).
 * Error and tolerance are relative to S, without `scale` to the largest R/h: the part of it that does not vanish.
 *
 * Shapes: as many remainders as steps, at least one. Units: remainders, value in the unit of f; scale, alpha and U in
 * that of f by step. Domain: steps positive and distinct, in any order; scale, rtol >= 0.
 * Throws: RangeError naming the argument whose length is wrong.
 * NaN policy: `invalid` where a remainder is not finite; otherwise no NaN.
 * Source: A. Griewank, A. Walther, Evaluating Derivatives, 2nd ed., SIAM 2008; P. E. Farrell, D. A. Ham, S. W. Funke,
 * M. E. Rognes, SIAM J. Sci. Comput. 35(4):C369-C393, 2013 (the test); JCGM 106:2012 (the verdict).
 */
export function judgeTaylor(probe: TaylorProbe, rtol: number): JudgedTaylorProbe {
  const { steps, remainders, scale } = probe;
  if (steps.length === 0) throw new RangeError("steps: 0 numbers, expected at least one");
  if (remainders.length !== steps.length) {
    throw new RangeError(`remainders: ${remainders.length} numbers, expected ${steps.length}`);
  }
  if (!remainders.every(Number.isFinite)) return notFinite(probe.value === null);
  const survey = surveyRemainders(probe);
  const alpha = extrapolateRemainders(survey);
  const slope = slopeOver(survey, survey.usable);
  const told = { slope, usableSteps: survey.usable.length, assumed: survey.assumed };
  const linear = survey.usable.length === 0;
  const floor = scale ?? (linear ? sizeOf(probe) : largestQuotient(survey));
  const distance = Math.abs(alpha.value);
  const verdict =
    scale !== null || linear
      ? decideProbe(distance, alpha.uncertainty, rtol * floor, survey.assumed ? ASSUMED_GUARD : 1)
      : bySlope(survey, alpha);
  const error = distance === 0 ? 0 : distance / floor;
  const uncertainty = alpha.uncertainty;
  const tolerance = scale !== null || linear ? rtol : null;
  const judged = { verdict, derivative: distance, reference: 0, uncertainty, floor, error, tolerance, ...told };
  return { ...judged, sentence: sentenceOf(judged, linear) };
}

/** |f| as posted or, where not, as the largest remainder tells. */
function sizeOf({ value, remainders }: TaylorProbe): number {
  return value === null ? Math.max(...remainders.map(Math.abs)) : Math.abs(value);
}

function largestQuotient({ steps, sizes, usable }: Remainders): number {
  return Math.min(Number.MAX_VALUE, Math.max(...usable.map((k) => sizes[k]! / steps[k]!)));
}

function slopeOver({ steps, sizes }: Remainders, positions: readonly number[]): number | null {
  return logSlope(
    positions.map((k) => steps[k]!),
    positions.map((k) => sizes[k]!),
  );
}

function bySlope(survey: Remainders, alpha: Extrapolated): "agrees" | "disagrees" | "unresolved" {
  const { steps, usable } = survey;
  const slope = usable.length < 3 ? null : slopeOver(survey, usable.slice(-3));
  if (slope === null) return "unresolved";
  const guard = survey.assumed ? ASSUMED_GUARD : 1;
  if (slope <= WRONG_SLOPE && Math.abs(alpha.value) > guard * alpha.uncertainty) return "disagrees";
  const spans = steps[usable[0]!]! / steps[usable.at(-1)!]! >= ACQUITTING_SPAN;
  return slope >= RIGHT_SLOPE && spans ? "agrees" : "unresolved";
}

function sentenceOf(judged: Omit<JudgedTaylorProbe, "sentence">, linear: boolean): string {
  const { verdict, error, uncertainty, floor, tolerance, slope } = judged;
  if (linear) {
    return verdict === "agrees"
      ? "no remainder stands above its rounding: the function is linear along this line"
      : "no remainder stands above its rounding: the steps are too small to tell";
  }
  if (tolerance === null) {
    const shown =
      slope === null ? "too few steps are usable for a slope" : `the remainders go as h^${slope.toFixed(2)}`;
    return verdict === "unresolved" ? `${shown}; the size of g.d was not posted, and steps alone do not tell` : shown;
  }
  const allowed = `${shown(tolerance)} is allowed`;
  if (verdict === "unresolved") {
    const seen = uncertainty / floor;
    return `the remainders tell the directional derivative to ${shown(seen)} of its size, ${allowed}`;
  }
  return `the directional derivative is off by ${shown(error)} of its size, ${allowed}`;
}

function notFinite(assumed: boolean): JudgedTaylorProbe {
  return {
    verdict: "invalid",
    derivative: NaN,
    reference: 0,
    uncertainty: NaN,
    floor: 0,
    error: NaN,
    tolerance: null,
    assumed,
    slope: null,
    usableSteps: 0,
    sentence: "a remainder is not a finite number",
  };
}
